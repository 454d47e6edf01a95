/** Recognises the failures that are nobody's mistake, wherever in a chain of causes they stand. */

function* chain(error: unknown): Generator<{ code?: unknown; message?: unknown }> {
  let current = error;
  for (let depth = 0; depth < 8 && typeof current === "object" && current !== null; depth++) {
    yield current;
    current = "cause" in current ? current.cause : undefined;
  }
}

/** PostgreSQL 53100 disk_full, or the operating system's ENOSPC and EDQUOT. */
export function isDiskFull(error: unknown): boolean {
  for (const { code, message } of chain(error)) {
    if (code === "53100" || code === "ENOSPC" || code === "EDQUOT") return true;
    if (typeof message === "string" && message.includes("No space left on device")) return true;
  }
  return false;
}

const OUT_OF_REACH = new Set([
  "ECONNREFUSED",
  "ECONNRESET",
  "ENOTFOUND",
  "ETIMEDOUT",
  "57P01", // admin_shutdown
  "57P02", // crash_shutdown
  "57P03", // cannot_connect_now
  "53300", // too_many_connections
]);

/** The database server refuses, is gone or does not answer. */
export function isOutOfReach(error: unknown): boolean {
  for (const { code, message } of chain(error)) {
    if (typeof code === "string" && OUT_OF_REACH.has(code)) return true;
    if (typeof message === "string" && message.startsWith("Connection terminated")) return true;
  }
  return false;
}

/** PostgreSQL 23505 unique_violation. */
export function isDuplicate(error: unknown): boolean {
  for (const { code } of chain(error)) if (code === "23505") return true;
  return false;
}
