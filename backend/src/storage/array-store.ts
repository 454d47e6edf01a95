/** Where long arrays lie, named by the SHA-256 of their bytes. What is once put never changes. */

/** Injection token of the {@link ArrayStore}. */
export const ARRAY_STORE = Symbol("array store");

export interface ArrayStore {
  /**
   * Keeps the bytes under their hash; whole or not at all. Putting what is there already costs nothing.
   * @throws whatever the medium throws, such as a full disk's ENOSPC; then nothing is left behind
   */
  put(sha256: string, bytes: Uint8Array): Promise<void>;
  /** Null where there is no such array. */
  get(sha256: string): Promise<Uint8Array | null>;
}
