import Button from "@mui/material/Button";
import { useRouteError } from "react-router-dom";
import { LinkButton } from "../components/link-button";
import { PageMessage } from "../components/page-message";
import { ApiError, sentenceOf } from "../lib/api";
import { NotFoundPage } from "./not-found-page";

/** A part of the program that did not arrive, most often because the server was updated under an open tab. */
const isMissingChunk = (error: unknown): boolean =>
  error instanceof TypeError && /dynamically imported module|module script/i.test(error.message);

/** Where a page that threw ends: a sentence and two ways on. */
export function CrashPage() {
  const error = useRouteError();
  if (error instanceof ApiError && error.status === 404) return <NotFoundPage />;
  return (
    <main>
      <PageMessage
        title={isMissingChunk(error) ? "This page did not load" : "This page stopped working"}
        actions={
          <>
            <Button variant="contained" color="primary" onClick={() => window.location.reload()}>
              Reload
            </Button>
            <LinkButton to="/">Go to the projects</LinkButton>
          </>
        }
      >
        {isMissingChunk(error)
          ? "A part of the program could not be fetched: the server was updated or cannot be reached. Reload the page."
          : sentenceOf(error)}
      </PageMessage>
    </main>
  );
}
