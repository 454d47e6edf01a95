import Button from "@mui/material/Button";
import Dialog from "@mui/material/Dialog";
import DialogActions from "@mui/material/DialogActions";
import DialogContent from "@mui/material/DialogContent";
import DialogTitle from "@mui/material/DialogTitle";
import TextField from "@mui/material/TextField";
import type { ReactNode } from "react";
import { useState } from "react";
import { Refusal } from "../../components/refusal";

interface NameDialogProps {
  title: string;
  label: string;
  initialName: string;
  confirm: string;
  pending: boolean;
  /** What the server refused; null before. */
  error: unknown;
  /** The name may be left empty, and something else then names it. */
  optional?: boolean;
  wide?: boolean;
  children?: ReactNode;
  onConfirm: (name: string) => void;
  onClose: () => void;
}

/** Asks for a name, with room for what else belongs to the new thing. */
export function NameDialog(props: NameDialogProps) {
  const {
    title,
    label,
    initialName,
    confirm,
    pending,
    error,
    optional = false,
    wide = false,
    children,
  } = props;
  const [name, setName] = useState(initialName);
  const [tried, setTried] = useState(false);
  const missing = name.trim() === "" && !optional;
  return (
    <Dialog open onClose={props.onClose} maxWidth={wide ? "md" : "xs"} fullWidth aria-labelledby="name-title">
      <form
        noValidate
        style={{ display: "contents" }}
        onSubmit={(event) => {
          event.preventDefault();
          setTried(true);
          if (!missing) props.onConfirm(name.trim());
        }}
      >
        <DialogTitle id="name-title">{title}</DialogTitle>
        <DialogContent>
          <TextField
            label={label}
            value={name}
            autoFocus
            sx={{ mt: "6px" }}
            error={tried && missing}
            helperText={tried && missing ? "Give it a name." : undefined}
            slotProps={{ htmlInput: { maxLength: 200, required: !optional } }}
            onChange={(event) => setName(event.target.value)}
          />
          {children}
          {error === null ? null : (
            <div style={{ marginTop: 14 }}>
              <Refusal error={error} />
            </div>
          )}
        </DialogContent>
        <DialogActions>
          <Button variant="text" onClick={props.onClose}>
            Cancel
          </Button>
          <Button type="submit" variant="contained" color="primary" disabled={pending}>
            {confirm}
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
