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
  const next = safeNext(search.get("next"));
  const goOn = (): void => void navigate(next, { replace: true });
  if (session.data) return <Navigate replace to={next} />;
  const { needsFirstOwner = false, demo = [] } = welcome.data ?? {};
  return (
    <div className="sign-in">
      <title>Sign in · Heddle</title>
      <main className="sign-in-sheet">
        <div className="sign-in-name">
          <Mark size={28} />
          <span>heddle</span>
        </div>
        <h1>{needsFirstOwner ? "Set up this installation" : "Sign in"}</h1>
        <p>
          {needsFirstOwner
            ? "Nobody is here yet. The first person owns the workspace and can give others their roles."
            : "A bench for sections of waveguides and enclosures: draw, run, watch the field, read the probe."}
        </p>
        {welcome.isError ? <Notice tone="limit">{sentenceOf(welcome.error)}</Notice> : null}
        {needsFirstOwner ? <FirstOwnerForm onDone={goOn} /> : <SignInForm onDone={goOn} />}
        {demo.length > 0 ? (
          <section>
            <h2 className="label">Or look around the demo as</h2>
            <DemoSignIn demo={demo} onDone={goOn} />
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
