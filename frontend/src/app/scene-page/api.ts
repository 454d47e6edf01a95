import { SceneDto, StaleRevisionDto } from "@heddle/backend/contract";
import type { Scene } from "@heddle/kernels/scene";
import { useQuery } from "@tanstack/react-query";
import { ApiError, request, sentenceOf } from "../../lib/api";
import type { SaveOutcome } from "./autosave";

export const sceneKey = (sceneId: string) => ["scene", sceneId] as const;

/** The scene as it stood when the page was opened; the editor and autosave carry on from there. */
export const useScene = (sceneId: string) =>
  useQuery({
    queryKey: sceneKey(sceneId),
    queryFn: ({ signal }) => request("GET", `/api/scenes/${sceneId}`, { answer: SceneDto, signal }),
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 0,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  });

/** Never rejects: every way a save can end is an outcome. */
export async function saveScene(
  sceneId: string,
  document: Scene,
  baseRevision: number,
): Promise<SaveOutcome> {
  try {
    const body = { baseRevision, document };
    return {
      kind: "saved",
      scene: await request("PUT", `/api/scenes/${sceneId}`, { body, answer: SceneDto }),
    };
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

export const copyScene = (sceneId: string, name: string, document: Scene): Promise<SceneDto> =>
  request("POST", `/api/scenes/${sceneId}/copies`, { body: { name, document }, answer: SceneDto });
