import Button from "@mui/material/Button";
import { problemsOf, sentenceOf } from "../lib/api";
import { Notice } from "./notice";

/** A refused request: its sentence, and every problem with its place where the server listed them. */
export function Refusal({ error, onRetry }: { error: unknown; onRetry?: () => void }) {
  const problems = problemsOf(error);
  return (
    <Notice tone="limit">
      <div style={{ display: "flex", gap: 12, alignItems: "center", justifyContent: "space-between" }}>
        <span>{sentenceOf(error)}</span>
        {onRetry === undefined ? null : (
          <Button size="small" onClick={onRetry}>
            Try again
          </Button>
        )}
      </div>
      {problems.length === 0 ? null : (
        <ul style={{ margin: "8px 0 0", paddingLeft: 18, maxHeight: 220, overflowY: "auto" }}>
          {problems.map((problem) => (
            <li key={`${problem.path} ${problem.sentence}`}>
              {problem.path === "" ? null : (
                <>
                  <code className="figure">{problem.path}</code>{" "}
                </>
              )}
              {problem.sentence}
            </li>
          ))}
        </ul>
      )}
    </Notice>
  );
}
