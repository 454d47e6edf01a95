/** Writing a result so that nothing half-written is ever found: temporary file in the same folder, fsync, rename. */
import {
  closeSync,
  fsyncSync,
  openSync,
  realpathSync,
  renameSync,
  statSync,
  unlinkSync,
  writeSync,
} from "node:fs";
import { basename, dirname, join } from "node:path";
import type { Writable } from "node:stream";

/** A result could not be written; the message is a sentence. */
export class OutputError extends Error {
  override name = "OutputError";
}

const reasonOf = (error: unknown): string => {
  const code = error instanceof Error && "code" in error ? error.code : undefined;
  switch (code) {
    case "ENOSPC":
      return "the disk is full";
    case "EDQUOT":
      return "the disk quota is used up";
    case "ENOENT":
      return "the folder does not exist";
    case "EACCES":
    case "EPERM":
    case "EROFS":
      return "writing is not permitted there";
    case "EISDIR":
      return "it is a folder";
    case "EPIPE":
      return "the reader closed it";
    default:
      return error instanceof Error ? error.message : "it failed";
  }
};

const failure = (where: string, error: unknown): OutputError =>
  new OutputError(`The result could not be written to ${where}: ${reasonOf(error)}.`);

const writeAll = (descriptor: number, bytes: Uint8Array): void => {
  for (let at = 0; at < bytes.length; ) at += writeSync(descriptor, bytes, at);
};

/** Flushes a folder's entries, so that the rename survives a power cut; not every platform can. */
const syncFolder = (folder: string): void => {
  let descriptor: number;
  try {
    descriptor = openSync(folder, "r");
  } catch {
    // Windows cannot open a folder; there the rename is as durable as it gets.
    return;
  }
  try {
    fsyncSync(descriptor);
  } finally {
    closeSync(descriptor);
  }
};

/**
 * A file that is written at once or not at all. It is opened before the run, so that a place that cannot be
 * written to is found before and not after the wait.
 */
export class OutputFile {
  readonly #target: string;
  readonly #temporary: string | null;
  #descriptor: number | null;

  constructor(private readonly path: string) {
    try {
      const existing = statSync(path, { throwIfNoEntry: false });
      if (existing?.isDirectory() === true)
        throw Object.assign(new Error("it is a folder"), { code: "EISDIR" });
      // A link's target is replaced, not the link; a device or pipe is written to, never replaced.
      this.#target = existing === undefined ? path : realpathSync(path);
      const plain = existing === undefined || existing.isFile();
      this.#temporary = plain
        ? join(dirname(this.#target), `.${basename(this.#target)}.${String(process.pid)}.tmp`)
        : null;
      this.#descriptor = openSync(this.#temporary ?? this.#target, "w");
    } catch (error) {
      throw failure(path, error);
    }
  }

  /** Writes the whole text and puts it in place. Throws an OutputError, after which nothing new is at the path. */
  write(text: string): void {
    const descriptor = this.#descriptor;
    if (descriptor === null)
      throw new OutputError(`The result for ${this.path} was already written or given up.`);
    try {
      writeAll(descriptor, Buffer.from(text, "utf8"));
      if (this.#temporary !== null) fsyncSync(descriptor);
      closeSync(descriptor);
      this.#descriptor = null;
      if (this.#temporary !== null) {
        renameSync(this.#temporary, this.#target);
        syncFolder(dirname(this.#target));
      }
    } catch (error) {
      this.discard();
      throw failure(this.path, error);
    }
  }

  /** Gives up: removes the temporary file. Does nothing after a successful write. */
  discard(): void {
    if (this.#descriptor === null) return;
    closeSync(this.#descriptor);
    this.#descriptor = null;
    if (this.#temporary !== null) unlinkSync(this.#temporary);
  }
}

/** Writes the whole text to a stream and waits until it is taken. Rejects with an OutputError. */
export const writeStream = (stream: Writable, text: string): Promise<void> =>
  new Promise((resolve, reject) => {
    const fail = (error: Error): void => {
      reject(failure("standard output", error));
    };
    stream.once("error", fail);
    stream.write(text, (error) => {
      if (error) fail(error);
      else {
        stream.removeListener("error", fail);
        resolve();
      }
    });
  });
