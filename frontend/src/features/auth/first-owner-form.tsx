import { FirstOwnerBody } from "@heddle/backend/contract";
import Button from "@mui/material/Button";
import TextField from "@mui/material/TextField";
import { useState } from "react";
import { Notice } from "../../components/notice";
import { useSignIn } from "./api";
import { signInSentence } from "./sentences";

const FIELDS = [
  { key: "name", label: "Your name", type: "text", autoComplete: "name", fault: "Give a name." },
  {
    key: "email",
    label: "E-mail",
    type: "email",
    autoComplete: "username",
    fault: "This is not an e-mail address.",
  },
  {
    key: "password",
    label: "Password",
    type: "password",
    autoComplete: "new-password",
    fault: "At least 10 characters, at most 128.",
  },
  {
    key: "workspace",
    label: "Name of the workspace",
    type: "text",
    autoComplete: "organization",
    fault: "Give the workspace a name.",
  },
] as const;

/** The first person of an empty installation, who will own its workspace. */
export function FirstOwnerForm({ onDone }: { onDone: () => void }) {
  const signIn = useSignIn();
  const [values, setValues] = useState({ name: "", email: "", password: "", workspace: "" });
  const [tried, setTried] = useState(false);
  const judged = FirstOwnerBody.safeParse({ ...values, email: values.email.trim() });
  const faulty = new Set(judged.success ? [] : judged.error.issues.map((issue) => issue.path[0]));
  return (
    <form
      noValidate
      style={{ display: "grid", gap: 14 }}
      onSubmit={(event) => {
        event.preventDefault();
        setTried(true);
        if (judged.success) signIn.mutate({ firstOwner: judged.data }, { onSuccess: onDone });
      }}
    >
      {FIELDS.map((field) => {
        const fault = tried && faulty.has(field.key);
        return (
          <TextField
            key={field.key}
            label={field.label}
            type={field.type}
            autoComplete={field.autoComplete}
            slotProps={{ htmlInput: { required: true } }}
            value={values[field.key]}
            onChange={(event) => setValues({ ...values, [field.key]: event.target.value })}
            error={fault}
            helperText={
              fault ? field.fault : field.key === "password" ? "At least 10 characters." : undefined
            }
          />
        );
      })}
      {signIn.isError ? <Notice tone="limit">{signInSentence(signIn.error)}</Notice> : null}
      <Button type="submit" variant="contained" color="primary" disabled={signIn.isPending}>
        {signIn.isPending ? "Setting up…" : "Set up the workspace"}
      </Button>
    </form>
  );
}
