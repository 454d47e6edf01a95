/** The part of the platform's WebAssembly interface that the engine uses; no library of types has it without the whole of a browser. */

/** A compiled module: opaque, may be sent to other threads. */
export interface KernelModule {
  readonly kernelModule?: never;
}

export interface SharedMemory {
  readonly buffer: SharedArrayBuffer;
  /** By pages of 64 KiB. */
  grow(pages: number): number;
}

export interface KernelExports {
  /** Publishes the job in the control block and takes part until all of it is done. */
  run(epoch: number, parts: number): void;
  /** Tells the helpers to return. */
  quit(): void;
}

interface Platform {
  validate(bytes: Uint8Array): boolean;
  compile(bytes: Uint8Array): Promise<KernelModule>;
  Memory: new (size: { initial: number; maximum: number; shared: true }) => SharedMemory;
  Instance: new (
    module: KernelModule,
    imports: { env: { memory: SharedMemory } },
  ) => {
    exports: KernelExports;
  };
}

/** Undefined where the platform has none. */
export const platform = (globalThis as unknown as { WebAssembly?: Platform }).WebAssembly;
export const hasSharedMemory =
  typeof (globalThis as { SharedArrayBuffer?: unknown }).SharedArrayBuffer === "function";
