import type { ExampleDto, ProjectDto, SceneSummaryDto } from "@heddle/backend/contract";
import type { ReactNode } from "react";
import { useState } from "react";
import { ConfirmDialog } from "../../components/confirm-dialog";
import { counted } from "../../lib/words";
import { useCreateProject, useCreateScene, useDeleteProject, useDeleteScene, useUpdateProject } from "./api";
import { NameDialog } from "./name-dialog";
import { StartFrom } from "./start-from";

interface StartProps {
  examples: readonly ExampleDto[] | undefined;
  thumb: (document: Record<string, unknown>, widthPx: number, heightPx: number) => ReactNode;
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
        create.mutate(
          { body: { name, notes: "", ...(example === null ? {} : { example }) } },
          { onSuccess: props.onCreated },
        )
      }
      onClose={props.onClose}
    >
      <StartFrom examples={props.examples} chosen={example} onChoose={setExample} thumb={props.thumb} />
    </NameDialog>
  );
}

export function RenameProjectDialog({ project, onClose }: { project: ProjectDto; onClose: () => void }) {
  const update = useUpdateProject();
  return (
    <NameDialog
      title="Rename the project"
      label="Name"
      initialName={project.name}
      confirm="Rename"
      pending={update.isPending}
      error={update.error}
      onConfirm={(name) =>
        update.mutate({ params: { path: { projectId: project.id } }, body: { name } }, { onSuccess: onClose })
      }
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
  const remove = useDeleteProject();
  return (
    <ConfirmDialog
      title={`Delete “${project.name}”?`}
      confirm="Delete the project"
      pending={remove.isPending}
      error={remove.error}
      onConfirm={() =>
        remove.mutate({ params: { path: { projectId: project.id } } }, { onSuccess: onDeleted ?? onClose })
      }
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
  const create = useCreateScene();
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
          {
            params: { path: { projectId: props.projectId } },
            body: { ...(name === "" ? {} : { name }), ...(example === null ? {} : { example }) },
          },
          { onSuccess: (scene) => props.onCreated(scene.id) },
        )
      }
      onClose={props.onClose}
    >
      <StartFrom examples={props.examples} chosen={example} onChoose={setExample} thumb={props.thumb} />
    </NameDialog>
  );
}

export function DeleteSceneDialog({ scene, onClose }: { scene: SceneSummaryDto; onClose: () => void }) {
  const remove = useDeleteScene();
  return (
    <ConfirmDialog
      title={`Delete “${scene.name}”?`}
      confirm="Delete the scene"
      pending={remove.isPending}
      error={remove.error}
      onConfirm={() => remove.mutate({ params: { path: { sceneId: scene.id } } }, { onSuccess: onClose })}
      onClose={onClose}
    >
      All its revisions and runs go with it, for everyone in the workspace. This cannot be undone; export the
      scene file first if the drawing should be kept.
    </ConfirmDialog>
  );
}
