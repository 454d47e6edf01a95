import { isOver } from "@heddle/backend/contract";
import Button from "@mui/material/Button";
import Slider from "@mui/material/Slider";
import { useState } from "react";
import { PACE_POSITIONS, paceAt, paceWords, positionOf } from "./pace";
import styles from "./runs.module.css";
import type { RunCost } from "./run-words";
import { costFigures, figuresOf, stateWords } from "./run-words";
import type { RunHandle } from "./use-run";

export interface RunPanelProps {
  handle: RunHandle;
  /** Null where the person may run; else why not, as a sentence. */
  refusal: string | null;
  /** What a run of the drawing would cost; null while it cannot be told. */
  cost: RunCost | null;
}

/** Run, pause, step, stop, pace, and how far the run is. */
export function RunPanel({ handle, refusal, cost }: RunPanelProps) {
  const { run, connection, notice } = handle;
  const failure = run?.message ?? null;
  return (
    <section className={styles.panel} aria-label="Run">
      {refusal === null ? (
        <>
          <Buttons handle={handle} />
          <Pace pace={handle.pace} onPace={handle.setPace} />
        </>
      ) : (
        <p className={styles.quiet}>{refusal}</p>
      )}
      <div aria-live="polite">
        {connection.kind === "lost" && <p className={styles.problem}>{connection.sentence}</p>}
        {failure !== null && <p className={styles.problem}>{failure}</p>}
        {notice !== null && (
          <div className={styles.problem}>
            <p>{notice.sentence}</p>
            {notice.problems.length > 0 && (
              <ul>
                {notice.problems.slice(0, 4).map((problem) => (
                  <li key={problem.path + problem.sentence}>
                    <span className={styles.path}>{problem.path}</span> {problem.sentence}
                  </li>
                ))}
                {notice.problems.length > 4 && <li>and {notice.problems.length - 4} more.</li>}
              </ul>
            )}
            <button type="button" className={styles.link} onClick={handle.dismissNotice}>
              Dismiss
            </button>
          </div>
        )}
      </div>
      {run === null ? (
        <>
          <p className={styles.quiet}>{handle.loading ? "Looking for the last run…" : "Not run yet."}</p>
          {cost !== null && (
            <dl className={styles.figures}>
              {costFigures(cost).map(({ name, value }) => (
                <div key={name}>
                  <dt>{name}</dt>
                  <dd>{value}</dd>
                </div>
              ))}
            </dl>
          )}
        </>
      ) : (
        <dl className={styles.figures}>
          <div>
            <dt>Run of rev {run.revision}</dt>
            <dd className={styles.state} data-testid="run-state">
              {stateWords(run)}
            </dd>
          </div>
          {figuresOf(run).map(({ name, value }) => (
            <div key={name}>
              <dt>{name}</dt>
              <dd>{value}</dd>
            </div>
          ))}
        </dl>
      )}
    </section>
  );
}

/** The mark that a run edited live carries wherever its field is shown, and the way to evidence. */
export function EditedMark({ handle, mayRun }: { handle: RunHandle; mayRun: boolean }) {
  if (handle.run?.edited !== true) return null;
  return (
    <div className={styles.edited} role="note">
      <span>Edited while it ran: for the eye, not evidence.</span>
      {mayRun && (
        <Button
          size="small"
          variant="outlined"
          onClick={() => {
            handle.runCleanly();
          }}
        >
          Run the edited scene cleanly
        </Button>
      )}
    </div>
  );
}

function Buttons({ handle }: { handle: RunHandle }) {
  const { run, start, command } = handle;
  const live = run !== null && !isOver(run.state);
  const paused = run?.state === "paused";
  return (
    <div className={styles.buttons}>
      {!live && (
        <Button
          variant="contained"
          color="primary"
          size="small"
          title="Saves, then runs (Ctrl+Enter)"
          aria-keyshortcuts="Control+Enter"
          onClick={() => {
            start();
          }}
        >
          Run
        </Button>
      )}
      {live && (
        <Button
          variant="contained"
          color="primary"
          size="small"
          disabled={run.state === "queued"}
          aria-keyshortcuts="Control+Enter"
          onClick={() => {
            command({ kind: paused ? "resume" : "pause" });
          }}
        >
          {paused ? "Resume" : "Pause"}
        </Button>
      )}
      <Button
        variant="outlined"
        size="small"
        disabled={live && !paused}
        title={
          live ? "One step of the field (while paused)" : "Starts a run that waits before its first step"
        }
        onClick={() => {
          if (live) command({ kind: "step", steps: 1 });
          else start({ paused: true });
        }}
      >
        Step
      </Button>
      <Button
        variant="outlined"
        size="small"
        disabled={!live}
        onClick={() => {
          command({ kind: "stop" });
        }}
      >
        Stop
      </Button>
    </div>
  );
}

function Pace({ pace, onPace }: { pace: number | null; onPace: (pace: number | null) => void }) {
  // While the thumb is held the slider is the person's; between, it shows the run's pace.
  const [held, setHeld] = useState<number | null>(null);
  const position = held ?? positionOf(pace);
  return (
    <div className={styles.pace}>
      <div className={styles.paceHead}>
        <span id="pace-label">Pace</span>
        <span className={styles.figure}>{paceWords(paceAt(position))}</span>
      </div>
      <Slider
        size="small"
        min={0}
        max={PACE_POSITIONS}
        value={position}
        aria-labelledby="pace-label"
        getAriaValueText={(value) => paceWords(paceAt(value))}
        onChange={(_event, value) => {
          setHeld(value);
        }}
        onChangeCommitted={(_event, value) => {
          setHeld(null);
          onPace(paceAt(value));
        }}
      />
    </div>
  );
}
