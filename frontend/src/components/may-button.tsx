import type { Permission } from "@heddle/backend/contract";
import type { ButtonProps } from "@mui/material/Button";
import Button from "@mui/material/Button";
import Tooltip from "@mui/material/Tooltip";
import { useSession } from "../hooks/session";
import { whyNot } from "../lib/why-not";

/** A button for those whose role allows it; for others it stands there, says why not, and does nothing. */
export function MayButton({ permission, onClick, ...rest }: { permission: Permission } & ButtonProps) {
  const reason = whyNot(useSession().role, permission);
  if (reason === null) return <Button {...rest} onClick={onClick} />;
  return (
    <Tooltip title={reason} describeChild>
      <Button
        {...rest}
        aria-disabled="true"
        className="refused"
        disableRipple
        onClick={(event) => event.preventDefault()}
      />
    </Tooltip>
  );
}
