/** The compiled kernel: made once, shared by all engines of a thread. */
import { KERNEL_BASE64 } from "./module.gen.js";
import type { KernelModule } from "./web-assembly.js";
import { hasSharedMemory, platform } from "./web-assembly.js";

/** A module, or the reason why this platform cannot run it. */
export type KernelOutcome = { module: KernelModule } | { missing: string };

let outcome: Promise<KernelOutcome> | undefined;

const bytesOf = (base64: string): Uint8Array =>
  Uint8Array.from(atob(base64), (letter) => letter.charCodeAt(0));

async function compile(): Promise<KernelOutcome> {
  if (!platform) return { missing: "WebAssembly" };
  if (!hasSharedMemory) return { missing: "shared memory" };
  const bytes = bytesOf(KERNEL_BASE64);
  if (!platform.validate(bytes)) return { missing: "vector instructions (SIMD) or atomics of WebAssembly" };
  return { module: await platform.compile(bytes) };
}

/** Compiles at the first call. */
export const loadKernel = (): Promise<KernelOutcome> => (outcome ??= compile());
