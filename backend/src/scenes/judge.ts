/** Judges scene documents at the server's door. The kernels decide; here stands only how strict each door is. */
import {
  documentSha256,
  readScene,
  sceneDocumentSchema,
  sceneSha256,
  type Scene,
} from "@heddle/kernels/scene";
import { Refusal } from "../common/refusal.js";

/** A document as it is kept, with the hash it goes by. */
export interface Judged {
  document: Record<string, unknown>;
  name: string;
  sha256: string;
}

const refuse = (problems: readonly { path: string; sentence: string }[]): never => {
  const count = problems.length === 1 ? "one problem" : `${problems.length} problems`;
  throw new Refusal("scene-refused", `The scene has ${count}; each is named with its place.`, {
    problems: problems.map(({ path, sentence }) => ({ path, sentence })),
  });
};

const filledIn = (scene: Scene): Judged => ({
  document: scene,
  name: scene.name,
  sha256: sceneSha256(scene),
});

/**
 * The strict door, for what comes from outside.
 * @throws Refusal "scene-refused" with every problem
 */
export function judgeImport(document: Record<string, unknown>): Judged {
  const outcome = readScene(document);
  return outcome.ok ? filledIn(outcome.scene) : refuse(outcome.problems);
}

/**
 * The door for a drawing in progress: only what is no scene document at all is refused. What cannot be run yet, a
 * source outside the section or a mesh too coarse, is kept as it is, for refusing it would lose somebody's work; a
 * run judges it again.
 * @throws Refusal "scene-refused" with every problem when the shape of the document is wrong
 */
export function judgeSave(document: Record<string, unknown>): Judged {
  const outcome = readScene(document);
  if (outcome.ok) return filledIn(outcome.scene);
  const shape = sceneDocumentSchema.safeParse(document);
  if (!shape.success) return refuse(outcome.problems);
  return { document: shape.data, name: shape.data.name, sha256: documentSha256(shape.data) };
}
