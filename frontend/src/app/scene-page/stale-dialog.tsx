import type { StaleRevisionDto } from "@heddle/backend/contract";
import Button from "@mui/material/Button";
import Dialog from "@mui/material/Dialog";
import DialogActions from "@mui/material/DialogActions";
import DialogContent from "@mui/material/DialogContent";
import DialogTitle from "@mui/material/DialogTitle";
import { Notice } from "../../components/notice";
import { wholeMoment } from "../../lib/moments";

export interface StaleDialogProps {
  stale: StaleRevisionDto;
  busy: boolean;
  /** Why the copy could not be made. */
  failure: string | null;
  onKeepCopy: () => void;
  onTakeTheirs: () => void;
}

const SHOWN = 12;

/** Two versions stand against each other: what the other one changed, and two ways on that lose neither. */
export function StaleDialog({ stale, busy, failure, onKeepCopy, onTakeTheirs }: StaleDialogProps) {
  const { current, changes } = stale;
  return (
    <Dialog open maxWidth="sm" fullWidth aria-labelledby="stale-title">
      <DialogTitle id="stale-title">Another version was saved meanwhile</DialogTitle>
      <DialogContent>
        <p style={{ marginTop: 0 }}>
          {current.updatedBy.name} saved revision {current.revision} on {wholeMoment(current.updatedAt)}. Your
          changes are kept on this machine and are not saved yet.
        </p>
        <h3 className="label">What the other version changed</h3>
        {changes.length === 0 ? (
          <p>Nothing that is drawn.</p>
        ) : (
          <ul style={{ paddingLeft: 18 }}>
            {changes.slice(0, SHOWN).map((change) => (
              <li key={change.path + change.sentence}>{change.sentence}</li>
            ))}
            {changes.length > SHOWN && <li>and {changes.length - SHOWN} more.</li>}
          </ul>
        )}
        {failure !== null && <Notice tone="limit">{failure}</Notice>}
      </DialogContent>
      <DialogActions>
        <Button variant="outlined" disabled={busy} onClick={onTakeTheirs} title="Undo brings yours back">
          Take theirs
        </Button>
        <Button variant="contained" disabled={busy} onClick={onKeepCopy}>
          Keep mine as a copy
        </Button>
      </DialogActions>
    </Dialog>
  );
}
