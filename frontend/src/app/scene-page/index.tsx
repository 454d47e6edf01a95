import type { SceneDto } from "@heddle/backend/contract";
import { readScene } from "@heddle/kernels/scene";
import { useMemo } from "react";
import { useParams } from "react-router-dom";
import { LinkButton } from "../../components/link-button";
import { PageMessage } from "../../components/page-message";
import { Refusal } from "../../components/refusal";
import { ApiError } from "../../lib/api";
import { NotFoundPage } from "../not-found-page";
import { PageWait } from "../page-wait";
import { useScene } from "./api";
import { SceneSheet } from "./scene-sheet";

/** One scene's sheet, once its document is here and can be read. */
export function ScenePage() {
  const { sceneId = "" } = useParams();
  const scene = useScene(sceneId);
  if (scene.error instanceof ApiError && scene.error.status === 404) return <NotFoundPage />;
  if (scene.isError)
    return (
      <PageMessage title="The scene could not be opened">
        <Refusal error={scene.error} onRetry={() => void scene.refetch()} />
      </PageMessage>
    );
  if (scene.data === undefined) return <PageWait />;
  // Another scene is another editor, another history, another run.
  return <ReadScene key={scene.data.id} scene={scene.data} />;
}

function ReadScene({ scene }: { scene: SceneDto }) {
  const read = useMemo(() => readScene(scene.document), [scene.document]);
  if (read.ok) return <SceneSheet scene={scene} document={read.scene} />;
  return (
    <PageMessage
      title="This scene cannot be drawn"
      actions={<LinkButton to={`/projects/${scene.projectId}`}>Back to {scene.projectName}</LinkButton>}
    >
      <p>
        Its document does not read as a scene. Nothing is changed; export it, mend it and import it again.
      </p>
      <ul>
        {read.problems.map((problem) => (
          <li key={problem.path + problem.sentence}>
            <code className="figure">{problem.path}</code> {problem.sentence}
          </li>
        ))}
      </ul>
    </PageMessage>
  );
}
