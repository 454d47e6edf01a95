import Button from "@mui/material/Button";
import TextField from "@mui/material/TextField";
import { useState } from "react";
import { Notice } from "../../components/notice";
import { signInSentence } from "./sentences";
import { useSignIn } from "./api";

interface SignInFormProps {
  /** Fixed where the person who works here signs in again. */
  email?: string;
  onDone: () => void;
}

/** E-mail address and password. */
export function SignInForm({ email: fixedEmail, onDone }: SignInFormProps) {
  const signIn = useSignIn();
  const [email, setEmail] = useState(fixedEmail ?? "");
  const [password, setPassword] = useState("");
  return (
    <form
      style={{ display: "grid", gap: 14 }}
      onSubmit={(event) => {
        event.preventDefault();
        signIn.mutate({ credentials: { email: email.trim(), password } }, { onSuccess: onDone });
      }}
    >
      <TextField
        label="E-mail"
        type="email"
        name="email"
        autoComplete="username"
        slotProps={{ htmlInput: { required: true } }}
        value={email}
        disabled={fixedEmail !== undefined}
        onChange={(event) => setEmail(event.target.value)}
      />
      <TextField
        label="Password"
        type="password"
        name="password"
        autoComplete="current-password"
        slotProps={{ htmlInput: { required: true } }}
        autoFocus={fixedEmail !== undefined}
        value={password}
        onChange={(event) => setPassword(event.target.value)}
      />
      {signIn.isError ? <Notice tone="limit">{signInSentence(signIn.error)}</Notice> : null}
      <Button type="submit" variant="contained" color="primary" disabled={signIn.isPending}>
        {signIn.isPending ? "Signing in…" : "Sign in"}
      </Button>
    </form>
  );
}
