import type { ProjectDto } from "@heddle/backend/contract";
import { useState } from "react";
import { useNavigate } from "react-router-dom";
import { MayButton } from "../components/may-button";
import { Page } from "../components/page";
import { PageHeader } from "../components/page-header";
import { hasNothing, QueryProblem } from "../components/query-problem";
import { SearchField } from "../components/search-field";
import { useExamples } from "../features/gallery";
import {
  DeleteProjectDialog,
  NewProjectDialog,
  ProjectsTable,
  RenameProjectDialog,
  useProjects,
} from "../features/projects";
import { useMay } from "../hooks/session";
import { counted } from "../lib/words";
import { thumb } from "./drawings";

type Open = { what: "new" } | { what: "rename" | "delete"; project: ProjectDto } | null;

/** All projects of the workspace. */
export function ProjectsPage() {
  const projects = useProjects();
  const examples = useExamples();
  const navigate = useNavigate();
  const mayEdit = useMay("scene.edit");
  const [search, setSearch] = useState("");
  const [open, setOpen] = useState<Open>(null);
  const close = (): void => setOpen(null);
  const sections = projects.data?.reduce((sum, project) => sum + project.sceneCount, 0) ?? 0;
  return (
    <Page
      title="Projects"
      lead={
        projects.data === undefined
          ? "Sections grouped by what they belong to"
          : `${counted(projects.data.length, "project")}, ${counted(sections, "section")}`
      }
      tools={
        <>
          <SearchField label="Search projects" value={search} onChange={setSearch} />
          <MayButton
            permission="scene.edit"
            variant="contained"
            color="primary"
            onClick={() => setOpen({ what: "new" })}
          >
            New project
          </MayButton>
        </>
      }
      foot="A section says nothing of what varies along z. Its figures support a design decision; they replace neither a measurement by an accredited laboratory nor the limits of the standard that applies."
    >
      <PageHeader crumbs={[{ label: "Projects" }]} />
      <QueryProblem query={projects} />
      {hasNothing(projects) ? null : (
        <ProjectsTable
          projects={projects.data}
          search={search}
          empty={
            mayEdit
              ? "No projects yet. Begin with an empty sheet or an example: “New project”, above."
              : "No projects yet. An engineer or the owner can begin one; it will then be listed here."
          }
          onRename={(project) => setOpen({ what: "rename", project })}
          onDelete={(project) => setOpen({ what: "delete", project })}
        />
      )}
      {open?.what === "new" ? (
        <NewProjectDialog
          examples={examples.data}
          thumb={thumb}
          onCreated={(project) => void navigate(`/projects/${project.id}`)}
          onClose={close}
        />
      ) : null}
      {open?.what === "rename" ? <RenameProjectDialog project={open.project} onClose={close} /> : null}
      {open?.what === "delete" ? <DeleteProjectDialog project={open.project} onClose={close} /> : null}
    </Page>
  );
}
