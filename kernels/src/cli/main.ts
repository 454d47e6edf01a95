/** Connects `solve` with the process: streams, interrupts, exit status. */
import { openSession } from "../solving/index.js";
import { solve } from "./solve.js";

/** Runs `solve` with the process's arguments and sets its exit status. */
export const main = async (args: readonly string[]): Promise<void> => {
  const interrupt = new AbortController();
  const onSignal = (): void => {
    interrupt.abort();
  };
  process.on("SIGINT", onSignal);
  process.on("SIGTERM", onSignal);
  try {
    process.exitCode = await solve(args, {
      stdout: process.stdout,
      stderr: process.stderr,
      interrupt: interrupt.signal,
      openSession,
    });
  } finally {
    process.off("SIGINT", onSignal);
    process.off("SIGTERM", onSignal);
  }
};
