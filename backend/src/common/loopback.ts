/** Whether an address or host name means this very machine. */
export function isLoopback(host: string | undefined): boolean {
  if (host === undefined) return false;
  const bare = host.toLowerCase().replace(/^\[|\]$/g, "");
  return (
    bare === "localhost" ||
    bare === "::1" ||
    /^127\.\d{1,3}\.\d{1,3}\.\d{1,3}$/.test(bare) ||
    /^::ffff:127\.\d{1,3}\.\d{1,3}\.\d{1,3}$/.test(bare)
  );
}

/** The name in a Host header, without its port. */
export const hostName = (header: string | undefined): string | undefined => header?.replace(/:\d+$/, "");
