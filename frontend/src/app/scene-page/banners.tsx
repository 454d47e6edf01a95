import Button from "@mui/material/Button";
import { Notice } from "../../components/notice";
import { wholeMoment } from "../../lib/moments";
import type { Draft, SaveState } from "./autosave";

export interface DraftBannerProps {
  draft: Draft;
  onRestore: () => void;
  onDrop: () => void;
}

/** Changes of an earlier visit that never reached the server are offered again. */
export function DraftBanner({ draft, onRestore, onDrop }: DraftBannerProps) {
  return (
    <Notice tone="plain">
      <div className="banner-row">
        <span>Changes of {wholeMoment(draft.at)} are kept on this machine and never reached the server.</span>
        <Button size="small" variant="outlined" onClick={onRestore}>
          Bring them back
        </Button>
        <Button size="small" onClick={onDrop}>
          Drop them
        </Button>
      </div>
    </Notice>
  );
}

/** Why the drawing is not saved, where a person can do something about it. */
export function SaveBanner({ state, onRetry }: { state: SaveState; onRetry: () => void }) {
  if (state.kind === "offline") {
    return (
      <Notice tone="limit">
        <div className="banner-row">
          <span>
            {state.sentence} What you draw is kept on this machine and saved as soon as the server answers.
          </span>
          <Button size="small" variant="outlined" onClick={onRetry}>
            Try now
          </Button>
        </div>
      </Notice>
    );
  }
  if (state.kind !== "refused") return null;
  return (
    <Notice tone="limit">
      {state.sentence}
      {state.problems.length > 0 && (
        <ul className="banner-problems">
          {state.problems.slice(0, 5).map((problem) => (
            <li key={problem.path + problem.sentence}>
              <code className="figure">{problem.path}</code> {problem.sentence}
            </li>
          ))}
        </ul>
      )}
    </Notice>
  );
}
