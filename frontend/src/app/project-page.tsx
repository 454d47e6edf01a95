import type { SceneSummaryDto } from "@heddle/backend/contract";
import { useState } from "react";
import { useNavigate, useParams } from "react-router-dom";
import { MayButton } from "../components/may-button";
import { MoreMenu } from "../components/more-menu";
import { Page } from "../components/page";
import { PageHeader } from "../components/page-header";
import { hasNothing, QueryProblem } from "../components/query-problem";
import { useExamples } from "../features/gallery";
import {
  Activity,
  DeleteProjectDialog,
  DeleteSceneDialog,
  ImportSceneDialog,
  Members,
  NewSceneDialog,
  RenameProjectDialog,
  SceneCards,
  useProject,
  useScenes,
} from "../features/projects";
import { useMay, useSession } from "../hooks/session";
import { sentenceOf, statusOf } from "../lib/api";
import { whyNot } from "../lib/why-not";
import { counted } from "../lib/words";
import { NotAllowedPage } from "./not-allowed-page";
import { NotFoundPage } from "./not-found-page";
import "./project-page.css";
import { thumb } from "./drawings";

/** One project: its scenes as small drawings, its people, what happened. */
export function ProjectPage() {
  const { projectId = "" } = useParams();
  const navigate = useNavigate();
  const { role } = useSession();
  const project = useProject(projectId);
  const scenes = useScenes(projectId);
  const examples = useExamples();
  const mayEdit = useMay("scene.edit");
  const [open, setOpen] = useState<
    "new" | "import" | "rename" | "delete" | { scene: SceneSummaryDto } | null
  >(null);
  const close = (): void => setOpen(null);
  const openScene = (sceneId: string): void => void navigate(`/scenes/${sceneId}`);
  if (statusOf(project.error) === 404) return <NotFoundPage />;
  if (statusOf(project.error) === 403) {
    return <NotAllowedPage permission="watch" sentence={sentenceOf(project.error)} />;
  }
  const name = project.data?.name ?? "…";
  return (
    <Page
      title={name}
      lead={
        project.data === undefined
          ? undefined
          : `${counted(project.data.sceneCount, "section")}, owned by ${project.data.owner.name}`
      }
      tools={
        <>
          <MayButton permission="scene.edit" onClick={() => setOpen("import")}>
            Import a scene file
          </MayButton>
          <MayButton
            permission="scene.edit"
            variant="contained"
            color="primary"
            onClick={() => setOpen("new")}
          >
            New scene
          </MayButton>
          <MoreMenu
            label="More for this project"
            items={[
              { label: "Rename…", onClick: () => setOpen("rename"), refused: whyNot(role, "scene.edit") },
              {
                label: "Delete…",
                onClick: () => setOpen("delete"),
                refused: whyNot(role, "workspace.administer"),
              },
            ]}
          />
        </>
      }
      foot="A section says nothing of what varies along z."
    >
      <PageHeader crumbs={[{ label: "Projects", to: "/" }, { label: name }]} />
      {project.data !== undefined && project.data.notes !== "" ? (
        <p className="project-notes">{project.data.notes}</p>
      ) : null}
      <QueryProblem query={project} />
      <div className="project-columns">
        <div>
          <QueryProblem query={scenes} />
          {hasNothing(scenes) ? null : scenes.data?.length === 0 ? (
            <div className="project-empty">
              <h2>No scenes yet</h2>
              <p>
                {mayEdit
                  ? "A scene is one section with everything a run needs. Draw one on an empty sheet, begin with an example, or import a scene file."
                  : "An engineer or the owner can draw one; it will then be listed here."}
              </p>
            </div>
          ) : (
            <SceneCards scenes={scenes.data} thumb={thumb} onDelete={(scene) => setOpen({ scene })} />
          )}
        </div>
        <aside>
          <Members />
          <Activity projectId={projectId} />
        </aside>
      </div>
      {typeof open === "object" && open !== null ? (
        <DeleteSceneDialog scene={open.scene} onClose={close} />
      ) : null}
      {open === "new" ? (
        <NewSceneDialog
          projectId={projectId}
          examples={examples.data}
          initialExample={null}
          thumb={thumb}
          onCreated={openScene}
          onClose={close}
        />
      ) : null}
      {open === "import" ? (
        <ImportSceneDialog projectId={projectId} onCreated={openScene} onClose={close} />
      ) : null}
      {open === "rename" && project.data ? (
        <RenameProjectDialog project={project.data} onClose={close} />
      ) : null}
      {open === "delete" && project.data ? (
        <DeleteProjectDialog project={project.data} onDeleted={() => void navigate("/")} onClose={close} />
      ) : null}
    </Page>
  );
}
