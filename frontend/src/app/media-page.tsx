export function MediaPage() {
  return null;
}
