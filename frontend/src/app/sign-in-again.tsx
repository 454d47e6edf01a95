import Button from "@mui/material/Button";
import Dialog from "@mui/material/Dialog";
import DialogActions from "@mui/material/DialogActions";
import DialogContent from "@mui/material/DialogContent";
import DialogTitle from "@mui/material/DialogTitle";
import { useEffect, useState } from "react";
import { DemoSignIn, SignInForm, useWelcome } from "../features/auth";
import { useSession } from "../hooks/session";
import { onSignedOut } from "../lib/api";

/** The session ended under an open page: one can sign in again on the spot, and the page stays as it is. */
export function SignInAgain() {
  const session = useSession();
  const [open, setOpen] = useState(false);
  useEffect(() => onSignedOut(() => setOpen(true)), []);
  return open ? (
    <Dialog open maxWidth="xs" fullWidth aria-labelledby="sign-in-again-title">
      <DialogTitle id="sign-in-again-title">Your session has ended</DialogTitle>
      <DialogContent>
        <p style={{ margin: "0 0 16px", color: "var(--soft)" }}>
          Sign in again as {session.person.name}. What is open here stays as it is.
        </p>
        <WaysIn email={session.person.email} role={session.role} onDone={() => setOpen(false)} />
      </DialogContent>
      <DialogActions>
        <Button variant="text" onClick={() => window.location.assign("/sign-in")}>
          Leave this page and sign in as someone else
        </Button>
      </DialogActions>
    </Dialog>
  ) : null;
}

interface WaysInProps {
  email: string;
  role: ReturnType<typeof useSession>["role"];
  onDone: () => void;
}

function WaysIn({ email, role, onDone }: WaysInProps) {
  const welcome = useWelcome();
  const demo = welcome.data?.demo.filter((person) => person.role === role) ?? [];
  return demo.length > 0 ? (
    <DemoSignIn demo={demo} onDone={onDone} />
  ) : (
    <SignInForm email={email} onDone={onDone} />
  );
}
