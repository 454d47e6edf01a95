/** Threads that are none: the real loop over a fake session, turned by this process's own event loop. */
import { encodeFrame, frameByteLength } from "@heddle/kernels/frames";
import { readScene } from "@heddle/kernels/scene";
import { SolverThreads, type SolverThread, type ThreadEvents } from "../live/solver-thread.js";
import type { SolverTask } from "../worker/protocol.js";
import { SolverLoop } from "../worker/solver-loop.js";
import { FakeSession, type FakeOptions } from "./fake-session.js";

interface Started {
  task: SolverTask;
  session: FakeSession;
  /** As if the thread were killed from outside. */
  die: (error?: Error) => void;
}

export class FakeThreads extends SolverThreads {
  readonly started: Started[] = [];
  /** For the sessions that are opened from now on. */
  options: FakeOptions = {};

  override start(task: SolverTask, events: ThreadEvents): SolverThread {
    const session = new FakeSession(this.options);
    let alive = true;
    let timer: NodeJS.Timeout | undefined;
    const die = (error?: Error): void => {
      if (!alive) return;
      alive = false;
      clearTimeout(timer);
      setImmediate(() => events.gone(error ?? null));
    };
    const kill = (): Promise<void> => {
      die();
      return Promise.resolve();
    };
    this.started.push({ task, session, die });

    const read = readScene(task.document);
    if (!read.ok) {
      setImmediate(() => events.message({ kind: "refused", problems: read.problems }));
      return { post: () => undefined, kill };
    }
    let loop: SolverLoop | null = null;
    const turn = (): void => {
      if (!alive || loop === null) return;
      try {
        const waitMs = loop.turn();
        if (waitMs !== null) timer = setTimeout(turn, Math.min(Math.max(waitMs, 1), 50));
      } catch (error) {
        const sentence = error instanceof Error ? error.message : String(error);
        events.message({ kind: "failed", sentence, progress: null });
      }
    };
    const wake = (): void => {
      clearTimeout(timer);
      timer = setTimeout(turn, 0);
    };
    setImmediate(() => {
      if (!alive) return;
      loop = new SolverLoop(
        {
          session,
          scene: read.scene,
          post: (message) => {
            const copy = structuredClone(message);
            setImmediate(() => events.message(copy));
          },
          read: (document) => {
            const outcome = readScene(document);
            return outcome.ok ? { scene: outcome.scene, sha256: "0".repeat(64) } : outcome;
          },
          encode: (sample, range, sequence) => {
            const target = new Uint8Array(frameByteLength(sample.width, sample.height));
            encodeFrame(sample, { range, sequence, target });
            return target;
          },
          now: () => performance.now(),
        },
        task,
      );
      wake();
    });
    return {
      post: (message) => {
        const copy = structuredClone(message);
        setImmediate(() => {
          if (!alive) return;
          loop?.receive(copy);
          wake();
        });
      },
      kill,
    };
  }
}
