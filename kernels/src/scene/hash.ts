/** Canonical form and hash: SHA-256 of a document serialized by RFC 8785. */
import { sha256 } from "@noble/hashes/sha2.js";
import { bytesToHex, utf8ToBytes } from "@noble/hashes/utils.js";
import canonicalize from "canonicalize";
import type { SolveResult } from "./result.js";
import type { Scene } from "./schema.js";

// The package's types describe an ES module's default export, but it is CommonJS: what is imported is the function.
const serialize = canonicalize as unknown as (document: unknown) => string | undefined;

/** The RFC 8785 text of a JSON value. Throws a TypeError for what JSON cannot hold. */
export const canonicalJson = (document: unknown): string => {
  const text = serialize(document);
  if (text === undefined) throw new TypeError("Only a JSON value has a canonical form.");
  return text;
};

/** Lower-case hexadecimal SHA-256 of a JSON value's canonical text in UTF-8. */
export const documentSha256 = (document: unknown): string =>
  bytesToHex(sha256(utf8ToBytes(canonicalJson(document))));

/** The hash of a filled-in scene: two documents that mean the same by defaults have the same. */
export const sceneSha256 = (scene: Scene): string => documentSha256(scene);

/** The hash of a result without `timing`, the only part that may differ between two runs. */
export const resultSha256 = (result: SolveResult): string => {
  const rest: Partial<SolveResult> = { ...result };
  delete rest.timing;
  return documentSha256(rest);
};
