export function ScenePage() {
  return null;
}
