/** Judges a medium as part of a scene would be: the kernels' schema and its sentences. */
import { BUILT_IN_MEDIA, mediumSchema, readScene } from "@heddle/kernels/scene";
import { Refusal } from "../common/refusal.js";
import { emptyScene } from "../scenes/empty-scene.js";

const PLACE = "media[0]";

/**
 * @returns the medium with its defaults filled in
 * @throws Refusal "bad-request" with every problem, its path within the medium
 */
export function judgeMedium(
  medium: Record<string, unknown>,
): Record<string, unknown> & { id: string; name: string } {
  const outcome = readScene({ ...emptyScene("Medium"), media: [medium] });
  const problems = outcome.ok
    ? []
    : outcome.problems
        .filter(({ path }) => path.startsWith(PLACE))
        .map(({ path, sentence }) => ({ path: path.slice(PLACE.length).replace(/^\./, ""), sentence }));
  const builtIn = BUILT_IN_MEDIA.find(({ id }) => id === medium.id);
  if (builtIn !== undefined) {
    problems.push({ path: "id", sentence: `"${builtIn.id}" is built in: choose another id.` });
  }
  const read = mediumSchema.safeParse(medium);
  if (read.success && problems.length === 0) return read.data;
  const first = problems.at(0);
  const where = first === undefined || first.path === "" ? "" : `${first.path}: `;
  throw new Refusal("bad-request", `The medium cannot be kept. ${where}${first?.sentence ?? ""}`, {
    problems,
  });
}
