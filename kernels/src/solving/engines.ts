/** Which engine serves a session. */
import type { Engine, EngineSetup, KernelOutcome, SpawnHelper } from "../stepping/index.js";
import { loadKernel, ReferenceEngine, WasmEngine } from "../stepping/index.js";

export type EngineName = "reference" | "wasm";
export type Precision = "f64" | "f32";

export interface EngineOptions {
  /** Default: wasm, or the reference engine where float64 is asked for. */
  engine?: EngineName;
  /** Default: what the engine is made for, f32 (wasm) or f64 (reference). */
  precision?: Precision;
  /** At most this many threads, the caller's own among them; more than one need `spawnHelper`. */
  threads?: number;
  /** Starts a helper thread; kernels know no platform, so the caller lends its own. */
  spawnHelper?: SpawnHelper;
  /** Hears, once in a process, why the wasm engine does not serve. */
  log?: (sentence: string) => void;
  /** The compiled kernel, or what the platform lacks for it. */
  kernel?: () => Promise<KernelOutcome>;
}

/** Sections with fewer points are stepped by one thread: meeting would take longer than the steps. */
const POINTS_WORTH_A_THREAD = 20_000;

let fallbackSaid = false;

/**
 * Resolves with what makes the engine of a setup. Rejects with a RangeError where engine and precision do not go together, or
 * where the wasm engine is asked for by name and the platform cannot run it.
 */
export async function chooseEngine(options: EngineOptions): Promise<(setup: EngineSetup) => Engine> {
  const { precision } = options;
  const name = options.engine ?? (precision === "f64" ? "reference" : "wasm");
  if (name === "reference") return (setup) => new ReferenceEngine(setup, precision ?? "f64");
  if (precision === "f64") {
    throw new RangeError("The wasm engine computes in f32; ask for the reference engine to compute in f64.");
  }
  const kernel = await (options.kernel ?? loadKernel)();
  if ("module" in kernel) {
    return (setup) => {
      const points = setup.lattice.columns * setup.lattice.rows;
      const useful = Math.max(1, Math.floor(points / POINTS_WORTH_A_THREAD));
      return new WasmEngine(kernel.module, setup, {
        threads: Math.min(options.threads ?? 1, useful),
        ...(options.spawnHelper && { spawn: options.spawnHelper }),
      });
    };
  }
  const reason = `This platform lacks ${kernel.missing}, which the wasm engine needs`;
  if (options.engine === "wasm") throw new RangeError(`${reason}; ask for the reference engine.`);
  if (!fallbackSaid) options.log?.(`${reason}: runs are served by the slower reference engine.`);
  fallbackSaid = true;
  return (setup) => new ReferenceEngine(setup, precision ?? "f64");
}
