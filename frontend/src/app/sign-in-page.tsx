import Button from "@mui/material/Button";
import Skeleton from "@mui/material/Skeleton";
import { useState } from "react";
import { Navigate, useNavigate, useSearchParams } from "react-router-dom";
import { Mark } from "../components/mark";
import { Notice } from "../components/notice";
import { DemoSignIn, FirstOwnerForm, SignInForm, useSessionQuery, useWelcome } from "../features/auth";
import { sentenceOf } from "../lib/api";
import "./sign-in-page.css";
import { safeNext } from "./safe-next";

export function SignInPage() {
  const [search] = useSearchParams();
  const navigate = useNavigate();
  const session = useSessionQuery();
  const welcome = useWelcome();
  const [settingUp, setSettingUp] = useState(false);
  const next = safeNext(search.get("next"));
  const goOn = (): void => void navigate(next, { replace: true });
  if (session.data) return <Navigate replace to={next} />;
  const { needsFirstOwner = false, demo = [] } = welcome.data ?? {};
  // Where there is a demo to look around in, setting up a workspace of one's own waits behind a button.
  const demoFirst = needsFirstOwner && demo.length > 0 && !settingUp;
  return (
    <div className="sign-in">
      <title>Sign in · Heddle</title>
      <main className="sign-in-sheet">
        <div className="sign-in-name">
          <Mark size={28} />
          <span>heddle</span>
        </div>
        <h1>{!needsFirstOwner ? "Sign in" : demoFirst ? "Welcome" : "Set up this installation"}</h1>
        <p>
          {needsFirstOwner && !demoFirst
            ? "The first person owns the workspace and can give others their roles."
            : "A bench for sections of waveguides and enclosures: draw, run, watch the field, read the probe."}
        </p>
        {welcome.isError ? <Notice tone="limit">{sentenceOf(welcome.error)}</Notice> : null}
        {welcome.isPending ? <Skeleton variant="rectangular" sx={{ height: 140 }} /> : null}
        {welcome.isPending || demoFirst ? null : needsFirstOwner ? (
          <FirstOwnerForm onDone={goOn} />
        ) : (
          <SignInForm onDone={goOn} />
        )}
        {demo.length > 0 ? (
          <section>
            <h2 className="label">{demoFirst ? "Look around the demo as" : "Or look around the demo as"}</h2>
            <DemoSignIn demo={demo} onDone={goOn} />
          </section>
        ) : null}
        {demoFirst ? (
          <section>
            <h2 className="label">Or begin in earnest</h2>
            <Button fullWidth onClick={() => setSettingUp(true)}>
              Set up a workspace of your own
            </Button>
          </section>
        ) : null}
        <footer>
          <dl>
            <div>
              <dt>Server</dt>
              <dd>{window.location.host}</dd>
            </div>
            <div>
              <dt>Version</dt>
              <dd>{welcome.data?.version ?? "–"}</dd>
            </div>
          </dl>
        </footer>
      </main>
    </div>
  );
}
