import type { SceneSummaryDto } from "@heddle/backend/contract";
import Skeleton from "@mui/material/Skeleton";
import type { ReactNode } from "react";
import { Link } from "react-router-dom";
import { Moment } from "../../components/moment";
import { MoreMenu } from "../../components/more-menu";
import { RunStateWord } from "../../components/run-state-word";
import { useSession } from "../../hooks/session";
import { sizeMm } from "../../lib/figures";
import { whyNot } from "../../lib/why-not";
import "./scene-cards.css";
import { saveSceneFile, sceneFileName } from "./scene-file";

interface SceneCardsProps {
  scenes: readonly SceneSummaryDto[] | undefined;
  thumb: (document: Record<string, unknown>, widthPx: number, heightPx: number) => ReactNode;
  onDelete: (scene: SceneSummaryDto) => void;
}

/** A project's scenes as small drawings, each with its own title block. */
export function SceneCards({ scenes, thumb, onDelete }: SceneCardsProps) {
  const { role } = useSession();
  if (scenes === undefined) {
    return (
      <div className="scene-cards" aria-busy="true">
        {[0, 1, 2].map((key) => (
          <Skeleton key={key} variant="rectangular" sx={{ height: 260 }} />
        ))}
      </div>
    );
  }
  return (
    <ul className="scene-cards" aria-label="Scenes">
      {scenes.map((scene) => (
        <li key={scene.id} className="scene-card">
          <div className="scene-picture">{thumb(scene.document, 264, 160)}</div>
          <div className="scene-block">
            <h3>
              <Link to={`/scenes/${scene.id}`}>{scene.name}</Link>
            </h3>
            <MoreMenu
              label={`More for ${scene.name}`}
              items={[
                {
                  label: "Export the scene file",
                  onClick: () => saveSceneFile(scene.document, sceneFileName(scene.name, scene.revision)),
                },
                {
                  label: "Delete…",
                  onClick: () => onDelete(scene),
                  refused: whyNot(role, "workspace.administer"),
                },
              ]}
            />
            <dl>
              <div>
                <dt>field</dt>
                <dd>{scene.polarization}</dd>
              </div>
              <div>
                <dt>section</dt>
                <dd>{sizeMm(scene.widthMm, scene.heightMm)}</dd>
              </div>
              <div>
                <dt>revision</dt>
                <dd>{scene.revision}</dd>
              </div>
              <div className="scene-wide">
                <dt>last run</dt>
                <dd>
                  {scene.lastRun === null ? (
                    "never run"
                  ) : (
                    <>
                      <RunStateWord state={scene.lastRun.state} />, <Moment at={scene.lastRun.at} />
                      {scene.lastRun.revision === scene.revision
                        ? null
                        : `, of rev ${scene.lastRun.revision}`}
                    </>
                  )}
                </dd>
              </div>
              <div className="scene-wide">
                <dt>changed</dt>
                <dd>
                  {scene.updatedBy.name}, <Moment at={scene.updatedAt} />
                </dd>
              </div>
            </dl>
          </div>
        </li>
      ))}
    </ul>
  );
}
