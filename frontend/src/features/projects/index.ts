export { AddToProjectDialog } from "./add-to-project";
export { useProject, useProjects, useScenes } from "./api";
export { ImportSceneDialog } from "./import-scene";
export {
  DeleteProjectDialog,
  DeleteSceneDialog,
  NewProjectDialog,
  NewSceneDialog,
  RenameProjectDialog,
} from "./project-dialogs";
export { Activity, Members } from "./project-side";
export { ProjectsTable } from "./projects-table";
export { SceneCards } from "./scene-cards";
