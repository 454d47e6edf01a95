export function ProjectsPage() {
  return null;
}
