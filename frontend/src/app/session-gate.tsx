import Button from "@mui/material/Button";
import { Navigate, Outlet, useLocation } from "react-router-dom";
import { PageMessage } from "../components/page-message";
import { useSessionQuery } from "../features/auth";
import { SessionContext } from "../hooks/session";
import { sentenceOf } from "../lib/api";
import { PageWait } from "./page-wait";
import { SignInAgain } from "./sign-in-again";

/** Lets a signed-in person through to the pages; sends everyone else to the sign-in and back afterwards. */
export function SessionGate() {
  const location = useLocation();
  const session = useSessionQuery();
  if (session.data === undefined) {
    if (session.isPending) return <PageWait />;
    return (
      <main>
        <PageMessage
          title="The server does not answer"
          actions={
            <Button variant="contained" color="primary" onClick={() => void session.refetch()}>
              Try again
            </Button>
          }
        >
          {sentenceOf(session.error)}
        </PageMessage>
      </main>
    );
  }
  if (session.data === null) {
    const next = `${location.pathname}${location.search}`;
    return <Navigate replace to={next === "/" ? "/sign-in" : `/sign-in?next=${encodeURIComponent(next)}`} />;
  }
  return (
    <SessionContext value={session.data}>
      <Outlet />
      <SignInAgain />
    </SessionContext>
  );
}
