import Link from "@mui/material/Link";
import Skeleton from "@mui/material/Skeleton";
import { Link as RouterLink } from "react-router-dom";
import { Moment } from "../../components/moment";
import { QueryProblem } from "../../components/query-problem";
import { initialsOf } from "../../lib/words";
import { useActivity, useMembers } from "./api";
import "./project-side.css";

/** Who is in the workspace, and in which role. */
export function Members() {
  const members = useMembers();
  return (
    <section className="side-section">
      <h2 className="label">Members</h2>
      <QueryProblem query={members} />
      {members.isPending ? <Skeleton /> : null}
      <ul>
        {members.data?.map((member) => (
          <li key={member.id} className="side-member">
            <span className="side-initials" aria-hidden="true">
              {initialsOf(member.name)}
            </span>
            <span>{member.name}</span>
            <span className="side-soft">{member.role}</span>
          </li>
        ))}
      </ul>
    </section>
  );
}

/** What happened in a project, newest first. */
export function Activity({ projectId }: { projectId: string }) {
  const activity = useActivity(projectId);
  return (
    <section className="side-section">
      <h2 className="label">Activity</h2>
      <QueryProblem query={activity} />
      {activity.isPending ? <Skeleton /> : null}
      {activity.data?.length === 0 ? <p className="side-soft">Nothing has happened here yet.</p> : null}
      <ol>
        {activity.data?.map((entry) => (
          <li key={`${entry.at} ${entry.who.id} ${entry.sentence}`} className="side-entry">
            <span>
              {entry.who.name}{" "}
              {entry.sceneId === null ? (
                entry.sentence
              ) : (
                <Link component={RouterLink} to={`/scenes/${entry.sceneId}`} underline="always">
                  {entry.sentence}
                </Link>
              )}
            </span>
            <span className="side-soft">
              <Moment at={entry.at} />
            </span>
          </li>
        ))}
      </ol>
    </section>
  );
}
