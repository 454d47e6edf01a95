// `npm run build -w kernels`: compiles src to dist where that is missing or older.
import { ensureBuilt } from "./built.mjs";

try {
  ensureBuilt();
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
  process.exitCode = 1;
}
