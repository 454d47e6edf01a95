import type { SceneDto } from "@heddle/backend/contract";
import { StaleRevisionDto } from "@heddle/backend/contract";
import type { Scene } from "@heddle/kernels/scene";
import { $api, api, ApiError, sentenceOf } from "../../lib/api";
import type { SaveOutcome } from "./autosave";

/** The scene as it stood when the page was opened; the editor and autosave carry on from there. */
export const useScene = (sceneId: string) =>
  $api.useQuery(
    "get",
    "/api/scenes/{sceneId}",
    { params: { path: { sceneId } } },
    {
      staleTime: Number.POSITIVE_INFINITY,
      gcTime: 0,
      refetchOnWindowFocus: false,
      refetchOnReconnect: false,
    },
  );

const at = (sceneId: string) => ({ params: { path: { sceneId } } });
const NO_BODY = "The server answered without a body.";

/** Never rejects: every way a save can end is an outcome. */
export async function saveScene(
  sceneId: string,
  document: Scene,
  baseRevision: number,
): Promise<SaveOutcome> {
  try {
    const { data } = await api.PUT("/api/scenes/{sceneId}", {
      ...at(sceneId),
      body: { baseRevision, document },
    });
    return data === undefined ? { kind: "offline", sentence: NO_BODY } : { kind: "saved", scene: data };
  } catch (error) {
    if (error instanceof ApiError && error.status === 409) {
      const stale = StaleRevisionDto.safeParse(error.body);
      if (stale.success) return { kind: "stale", stale: stale.data };
    }
    const sentence = sentenceOf(error);
    if (!(error instanceof ApiError) || error.status === 0 || error.status >= 500 || error.status === 401)
      return { kind: "offline", sentence };
    return { kind: "refused", sentence, problems: error.problems };
  }
}

/** @throws {ApiError} */
export async function copyScene(sceneId: string, name: string, document: Scene): Promise<SceneDto> {
  const { data } = await api.POST("/api/scenes/{sceneId}/copies", {
    ...at(sceneId),
    body: { name, document },
  });
  if (data === undefined) throw new Error(NO_BODY);
  return data;
}
