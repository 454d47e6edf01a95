import Button from "@mui/material/Button";
import Dialog from "@mui/material/Dialog";
import DialogActions from "@mui/material/DialogActions";
import DialogContent from "@mui/material/DialogContent";
import DialogTitle from "@mui/material/DialogTitle";
import type { ReactNode } from "react";
import { sentenceOf } from "../lib/api";
import { Notice } from "./notice";

interface ConfirmDialogProps {
  title: string;
  /** What will be lost, in one or two sentences. */
  children: ReactNode;
  /** Names the act: "Delete the project". */
  confirm: string;
  pending: boolean;
  /** What the server refused; null before. */
  error: unknown;
  onConfirm: () => void;
  onClose: () => void;
}

/** Asks before something that cannot be undone. */
export function ConfirmDialog({
  title,
  children,
  confirm,
  pending,
  error,
  onConfirm,
  onClose,
}: ConfirmDialogProps) {
  return (
    <Dialog open onClose={onClose} maxWidth="xs" fullWidth aria-labelledby="confirm-title">
      <DialogTitle id="confirm-title">{title}</DialogTitle>
      <DialogContent>
        {children}
        {error === null ? null : (
          <Notice tone="limit" style={{ marginTop: 12 }}>
            {sentenceOf(error)}
          </Notice>
        )}
      </DialogContent>
      <DialogActions>
        <Button autoFocus onClick={onClose}>
          Keep it
        </Button>
        <Button variant="contained" color="error" disabled={pending} onClick={onConfirm}>
          {confirm}
        </Button>
      </DialogActions>
    </Dialog>
  );
}
