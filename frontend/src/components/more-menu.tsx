import MoreHoriz from "@mui/icons-material/MoreHoriz";
import IconButton from "@mui/material/IconButton";
import Menu from "@mui/material/Menu";
import MenuItem from "@mui/material/MenuItem";
import { useState } from "react";

export interface MoreItem {
  label: string;
  onClick: () => void;
  /** Why it cannot be done here; shown under the label. */
  refused?: string | null;
}

/** The rest of what can be done with one thing, behind three dots. */
export function MoreMenu({ label, items }: { label: string; items: readonly MoreItem[] }) {
  const [anchor, setAnchor] = useState<HTMLElement | null>(null);
  return (
    <>
      <IconButton aria-label={label} aria-haspopup="menu" onClick={(event) => setAnchor(event.currentTarget)}>
        <MoreHoriz sx={{ fontSize: 18 }} />
      </IconButton>
      <Menu
        open={anchor !== null}
        anchorEl={anchor}
        onClose={() => setAnchor(null)}
        anchorOrigin={{ vertical: "bottom", horizontal: "right" }}
        transformOrigin={{ vertical: "top", horizontal: "right" }}
      >
        {items.map((item) => (
          <MenuItem
            key={item.label}
            aria-disabled={item.refused ? true : undefined}
            sx={
              item.refused
                ? { display: "block", whiteSpace: "normal", maxWidth: 280, color: "var(--soft)" }
                : undefined
            }
            onClick={() => {
              if (item.refused) return;
              setAnchor(null);
              item.onClick();
            }}
          >
            {item.label}
            {item.refused ? <div style={{ fontSize: 12 }}>{item.refused}</div> : null}
          </MenuItem>
        ))}
      </Menu>
    </>
  );
}
