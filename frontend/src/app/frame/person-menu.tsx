import ButtonBase from "@mui/material/ButtonBase";
import Divider from "@mui/material/Divider";
import Menu from "@mui/material/Menu";
import MenuItem from "@mui/material/MenuItem";
import { useState } from "react";
import { useNavigate } from "react-router-dom";
import { useSignOut } from "../../features/auth";
import { useSession } from "../../hooks/session";
import { initialsOf } from "../../lib/words";
import "./person-menu.css";

/** Who is signed in, where and as what; the way out. */
export function PersonMenu() {
  const { person, workspace, role } = useSession();
  const signOut = useSignOut();
  const navigate = useNavigate();
  const [anchor, setAnchor] = useState<HTMLElement | null>(null);
  return (
    <>
      <ButtonBase
        className="person"
        aria-label={`${person.name}, ${role} in ${workspace.name}`}
        aria-haspopup="menu"
        aria-expanded={anchor !== null}
        onClick={(event) => setAnchor(event.currentTarget)}
      >
        <span className="person-place">
          <span>{workspace.name}</span>
          <span>{role}</span>
        </span>
        <span className="person-initials" aria-hidden="true">
          {initialsOf(person.name)}
        </span>
      </ButtonBase>
      <Menu
        open={anchor !== null}
        anchorEl={anchor}
        onClose={() => setAnchor(null)}
        anchorOrigin={{ vertical: "bottom", horizontal: "right" }}
        transformOrigin={{ vertical: "top", horizontal: "right" }}
      >
        <li className="person-card">
          <strong>{person.name}</strong>
          <span>{person.email}</span>
          <span>
            {role} in {workspace.name}
          </span>
        </li>
        <Divider component="li" sx={{ my: 0.5 }} />
        <MenuItem
          disabled={signOut.isPending}
          onClick={() =>
            signOut.mutate(undefined, { onSuccess: () => void navigate("/sign-in", { replace: true }) })
          }
        >
          Sign out
        </MenuItem>
      </Menu>
    </>
  );
}
