/** Connects the commands with the process: streams, interrupts, exit status. */
import { openSession } from "../solving/index.js";
import { runModes } from "./modes.js";
import { type ExitStatus, solve } from "./solve.js";

/** Runs a command that the first interrupt or end signal aborts, and sets the process's exit status. */
const withInterrupt = async (command: (interrupt: AbortSignal) => Promise<ExitStatus>): Promise<void> => {
  const interrupt = new AbortController();
  const onSignal = (): void => {
    interrupt.abort();
  };
  process.on("SIGINT", onSignal);
  process.on("SIGTERM", onSignal);
  try {
    process.exitCode = await command(interrupt.signal);
  } finally {
    process.off("SIGINT", onSignal);
    process.off("SIGTERM", onSignal);
  }
};

/** Runs `solve` with the process's arguments and sets its exit status. */
export const main = (args: readonly string[]): Promise<void> =>
  withInterrupt((interrupt) =>
    solve(args, { stdout: process.stdout, stderr: process.stderr, interrupt, openSession }),
  );

/** Runs `modes` with the process's arguments and sets its exit status. */
export const modesMain = (args: readonly string[]): Promise<void> =>
  withInterrupt((interrupt) => runModes(args, { stdout: process.stdout, stderr: process.stderr, interrupt }));
