import type { ExampleDto, ProjectDto } from "@heddle/backend/contract";
import type { ReactNode } from "react";
import { useState } from "react";
import { ConfirmDialog } from "../../components/confirm-dialog";
import { counted } from "../../lib/words";
import { useCreateProject, useCreateScene, useDeleteProject, useUpdateProject } from "./api";
import { NameDialog } from "./name-dialog";
import { StartFrom } from "./start-from";

interface StartProps {
  examples: readonly ExampleDto[] | undefined;
  thumb: (document: Record<string, unknown>) => ReactNode;
  onClose: () => void;
}

export function NewProjectDialog(
  props: StartProps & { onCreated: (project: ProjectDto) => void; initialExample?: string },
) {
  const create = useCreateProject();
  const [example, setExample] = useState<string | null>(props.initialExample ?? null);
  return (
    <NameDialog
      title="New project"
      label="Name"
      initialName=""
      confirm="Create the project"
      wide
      pending={create.isPending}
      error={create.error}
      onConfirm={(name) =>
        create.mutate(example === null ? { name } : { name, example }, { onSuccess: props.onCreated })
      }
      onClose={props.onClose}
    >
      <StartFrom examples={props.examples} chosen={example} onChoose={setExample} thumb={props.thumb} />
    </NameDialog>
  );
}

export function RenameProjectDialog({ project, onClose }: { project: ProjectDto; onClose: () => void }) {
  const update = useUpdateProject(project.id);
  return (
    <NameDialog
      title="Rename the project"
      label="Name"
      initialName={project.name}
      confirm="Rename"
      pending={update.isPending}
      error={update.error}
      onConfirm={(name) => update.mutate({ name }, { onSuccess: onClose })}
      onClose={onClose}
    />
  );
}

interface DeleteProps {
  project: ProjectDto;
  onDeleted?: () => void;
  onClose: () => void;
}

export function DeleteProjectDialog({ project, onDeleted, onClose }: DeleteProps) {
  const remove = useDeleteProject(project.id);
  return (
    <ConfirmDialog
      title={`Delete “${project.name}”?`}
      confirm="Delete the project"
      pending={remove.isPending}
      error={remove.error}
      onConfirm={() => remove.mutate(undefined, { onSuccess: onDeleted ?? onClose })}
      onClose={onClose}
    >
      Its {counted(project.sceneCount, "section")}, their revisions and all their runs go with it, for
      everyone in the workspace. This cannot be undone.
    </ConfirmDialog>
  );
}

export function NewSceneDialog(
  props: StartProps & {
    projectId: string;
    onCreated: (sceneId: string) => void;
    initialExample: string | null;
  },
) {
  const create = useCreateScene(props.projectId);
  const [example, setExample] = useState(props.initialExample);
  return (
    <NameDialog
      title="New scene"
      label={example === null ? "Name" : "Name (left empty: the example's)"}
      initialName=""
      optional={example !== null}
      confirm="Create the scene"
      wide
      pending={create.isPending}
      error={create.error}
      onConfirm={(name) =>
        create.mutate(
          { ...(name === "" ? {} : { name }), ...(example === null ? {} : { example }) },
          { onSuccess: (scene) => props.onCreated(scene.id) },
        )
      }
      onClose={props.onClose}
    >
      <StartFrom examples={props.examples} chosen={example} onChoose={setExample} thumb={props.thumb} />
    </NameDialog>
  );
}
