/** Where to go after the sign-in: a path of this product, never another site. */
export function safeNext(next: string | null): string {
  if (next === null || !next.startsWith("/") || /^\/[/\\]/.test(next) || next.startsWith("/sign-in"))
    return "/";
  return next;
}
