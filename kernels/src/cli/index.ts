/** The command line: `solve` and `bench`, as functions that a thin executable calls. */
export { runBench } from "./bench.js";
export { main } from "./main.js";
export { EXIT, type ExitStatus, solve, type SolveIo } from "./solve.js";
