// Compiles the WebAssembly kernel (assembly/*.ts) into a module of TypeScript that carries its bytes, so that bundlers, browsers
// and worker threads need no file beside the code. Done again where a source is newer.
import { spawnSync } from "node:child_process";
import {
  existsSync,
  mkdtempSync,
  readFileSync,
  readdirSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from "node:fs";
import { createRequire } from "node:module";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

const folder = fileURLToPath(new URL("..", import.meta.url));
const target = join(folder, "src/stepping/wasm/module.gen.ts");
const FLAGS = [
  ...["-O3", "--noAssert", "--runtime", "stub"],
  ...["--enable", "simd", "--enable", "threads"],
  ...["--importMemory", "--sharedMemory", "--maximumMemory", "65536"],
];

const sources = () => [
  ...readdirSync(join(folder, "assembly"))
    .filter((name) => name.endsWith(".ts"))
    .map((name) => join(folder, "assembly", name)),
  join(folder, "src/stepping/wasm/layout.ts"),
];

const isFresh = () =>
  existsSync(target) &&
  Math.max(...sources().map((path) => statSync(path).mtimeMs)) <= statSync(target).mtimeMs;

/** asc's script, found beside the one entry of its package that may be required. */
const compiler = () =>
  join(dirname(createRequire(import.meta.url).resolve("assemblyscript/transform")), "..", "bin", "asc.js");

/** Compiles the kernel where its module is missing or older than a source. Throws with the compiler's words. */
export const ensureAssembled = () => {
  if (isFresh()) return;
  const scratch = mkdtempSync(join(folder, ".assembly-"));
  try {
    const binary = join(scratch, "kernel.wasm");
    const args = [compiler(), join(folder, "assembly/index.ts"), ...FLAGS, "--outFile", binary];
    const made = spawnSync(process.execPath, args, { encoding: "utf8", cwd: folder });
    if (made.status !== 0) {
      throw new Error(`The WebAssembly kernel could not be compiled:\n${made.stdout}${made.stderr}`.trim());
    }
    const text = readFileSync(binary).toString("base64");
    const draft = join(scratch, "module.gen.ts");
    writeFileSync(
      draft,
      `/** Made from kernels/assembly by kernels/bin/assemble.mjs. */\nexport const KERNEL_BASE64 =\n  "${text}";\n`,
    );
    renameSync(draft, target);
  } finally {
    rmSync(scratch, { recursive: true, force: true });
  }
};

/** For the test runner, which wants it before it reads a source. */
export const setup = () => ensureAssembled();

if (process.argv[1] === fileURLToPath(import.meta.url)) ensureAssembled();
