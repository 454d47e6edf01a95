import type { ProjectDto } from "@heddle/backend/contract";
import type { ReactNode } from "react";
import Link from "@mui/material/Link";
import { Link as RouterLink } from "react-router-dom";
import type { Column } from "../../components/data-table";
import { DataTable } from "../../components/data-table";
import { Moment } from "../../components/moment";
import { MoreMenu } from "../../components/more-menu";
import { RunStateWord } from "../../components/run-state-word";
import { useSession } from "../../hooks/session";
import { whyNot } from "../../lib/why-not";

interface ProjectsTableProps {
  projects: readonly ProjectDto[] | undefined;
  search: string;
  empty: ReactNode;
  onRename: (project: ProjectDto) => void;
  onDelete: (project: ProjectDto) => void;
}

const columns: readonly Column<ProjectDto>[] = [
  {
    key: "name",
    label: "Project",
    value: (project) => project.name,
    cell: (project) => (
      <Link component={RouterLink} to={`/projects/${project.id}`} sx={{ fontWeight: 500 }}>
        {project.name}
      </Link>
    ),
    width: "34%",
  },
  {
    key: "owner",
    label: "Owner",
    value: (project) => project.owner.name,
    cell: (project) => project.owner.name,
    hideBelow: "tablet",
  },
  {
    key: "sections",
    label: "Sections",
    value: (project) => project.sceneCount,
    cell: (project) => <span className="figure">{project.sceneCount}</span>,
    align: "right",
    width: 100,
  },
  {
    key: "lastRun",
    label: "Last run",
    value: (project) => project.lastRunAt,
    cell: (project) =>
      project.lastRunAt === null ? (
        <span style={{ color: "var(--soft)" }}>never</span>
      ) : (
        <Moment at={project.lastRunAt} />
      ),
    hideBelow: "phone",
  },
  {
    key: "state",
    label: "State",
    value: (project) => project.lastRunState,
    cell: (project) =>
      project.lastRunState === null ? (
        <span style={{ color: "var(--soft)" }}>–</span>
      ) : (
        <RunStateWord state={project.lastRunState} />
      ),
  },
  {
    key: "changed",
    label: "Changed",
    value: (project) => project.updatedAt,
    cell: (project) => <Moment at={project.updatedAt} />,
    hideBelow: "tablet",
  },
];

/** The workspace's projects: sorted by its heads, filtered by a search, arrows go from row to row. */
export function ProjectsTable({ projects, search, empty, onRename, onDelete }: ProjectsTableProps) {
  const { role } = useSession();
  return (
    <DataTable
      caption="Projects"
      rows={projects}
      rowKey={(project) => project.id}
      columns={columns}
      initialSort={{ key: "changed", descending: true }}
      search={search}
      empty={empty}
      actions={(project) => (
        <MoreMenu
          label={`More for ${project.name}`}
          items={[
            { label: "Rename…", onClick: () => onRename(project), refused: whyNot(role, "scene.edit") },
            {
              label: "Delete…",
              onClick: () => onDelete(project),
              refused: whyNot(role, "workspace.administer"),
            },
          ]}
        />
      )}
    />
  );
}
