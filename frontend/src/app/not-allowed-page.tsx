import type { Permission } from "@heddle/backend/contract";
import { rolesThat } from "@heddle/backend/contract";
import { LinkButton } from "../components/link-button";
import { PageMessage } from "../components/page-message";
import { useSession } from "../hooks/session";
import { whyNot } from "../lib/why-not";
import { eitherOf } from "../lib/words";

interface NotAllowedPageProps {
  /** What the page is for. */
  permission: Permission;
  /** What the server said, where it said something. */
  sentence?: string;
}

/** A page that this person's role does not open: why, and whose role does. */
export function NotAllowedPage({ permission, sentence }: NotAllowedPageProps) {
  const { role, workspace } = useSession();
  return (
    <PageMessage
      title="Your role does not open this page"
      actions={
        <LinkButton to="/" variant="contained" color="primary">
          Go to the projects
        </LinkButton>
      }
    >
      {sentence ?? whyNot(role, permission) ?? `You are ${role} in ${workspace.name}.`} It is open to:{" "}
      {eitherOf(rolesThat(permission))}. The owner of {workspace.name} can change roles.
    </PageMessage>
  );
}
