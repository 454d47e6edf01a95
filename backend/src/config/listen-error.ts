import type { Config } from "./config.js";

/** One sentence for a failure to listen or to reach the database; null for any other. */
export function listenError(error: unknown, config: Config): string | null {
  let current = error;
  for (let depth = 0; depth < 8 && current instanceof Error; depth++) {
    const code = "code" in current ? String(current.code) : "";
    const listens = "syscall" in current && current.syscall === "listen";
    if (listens && code === "EADDRINUSE") {
      return `Port ${config.port} on ${config.host} is taken: stop what listens there, or set PORT to another one.`;
    }
    if (listens && code === "EACCES")
      return `Port ${config.port} is not open to you: set PORT to 1024 or above.`;
    if (code === "EADDRNOTAVAIL" || (listens && code === "ENOTFOUND")) {
      return `${config.host} is no address of this machine: set HOST to one that is, such as 127.0.0.1.`;
    }
    if (config.database.kind === "postgres" && /^(E[A-Z]+|[0-9A-Z]{5})$/.test(code)) {
      return `The database of DATABASE_URL cannot be used (${code}: ${current.message}): check the address, the name and the password.`;
    }
    current = current.cause ?? (current instanceof AggregateError ? current.errors[0] : undefined);
  }
  return null;
}
