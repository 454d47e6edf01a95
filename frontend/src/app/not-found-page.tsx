import { LinkButton } from "../components/link-button";
import { PageMessage } from "../components/page-message";

export function NotFoundPage() {
  return (
    <PageMessage
      title="There is nothing here"
      actions={
        <LinkButton to="/" variant="contained" color="primary">
          Go to the projects
        </LinkButton>
      }
    >
      The address is mistyped, or what it named was deleted or belongs to another workspace.
    </PageMessage>
  );
}
