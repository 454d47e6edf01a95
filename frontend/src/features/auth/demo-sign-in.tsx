import type { MemberRole, WelcomeDto } from "@heddle/backend/contract";
import Button from "@mui/material/Button";
import { Notice } from "../../components/notice";
import { useSignIn } from "./api";
import { signInSentence } from "./sentences";

const DOES: Record<MemberRole, string> = {
  engineer: "draws, runs, iterates",
  reviewer: "watches, compares, comments",
  manager: "sets limits, signs off",
  owner: "runs the workspace",
};
const ORDER: readonly MemberRole[] = ["engineer", "reviewer", "manager", "owner"];

/** One button per person of the demo workspace, where the server offers them. */
export function DemoSignIn({ demo, onDone }: { demo: WelcomeDto["demo"]; onDone: () => void }) {
  const signIn = useSignIn();
  const people = [...demo].sort((a, b) => ORDER.indexOf(a.role) - ORDER.indexOf(b.role));
  return (
    <div style={{ display: "grid", gridTemplateColumns: people.length > 1 ? "1fr 1fr" : "1fr", gap: 8 }}>
      {people.map(({ role, name }) => (
        <Button
          key={role}
          disabled={signIn.isPending}
          onClick={() => signIn.mutate({ demo: role }, { onSuccess: onDone })}
          aria-label={`Sign in as the ${role}, ${name}`}
          sx={{
            display: "grid",
            justifyContent: "start",
            alignContent: "start",
            textAlign: "left",
            gap: "1px",
            py: "7px",
          }}
        >
          <span style={{ textTransform: "capitalize" }}>{role}</span>
          <span style={{ fontWeight: 400, fontSize: 12, color: "var(--soft)" }}>{DOES[role]}</span>
        </Button>
      ))}
      {signIn.isError ? (
        <Notice tone="limit" style={{ gridColumn: "1 / -1" }}>
          {signInSentence(signIn.error)}
        </Notice>
      ) : null}
    </div>
  );
}
