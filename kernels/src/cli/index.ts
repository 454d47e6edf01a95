/** The command line: `solve`, `modes` and `bench`, as functions that a thin executable calls. */
export { runBench } from "./bench.js";
export { main, modesMain } from "./main.js";
export { EXIT, type ExitStatus, solve, type SolveIo } from "./solve.js";
