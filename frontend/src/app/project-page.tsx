export function ProjectPage() {
  return null;
}
