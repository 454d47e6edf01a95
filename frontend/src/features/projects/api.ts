import type { RunState } from "@heddle/backend/contract";
import { isOver } from "@heddle/backend/contract";
import { useQueryClient } from "@tanstack/react-query";
import { $api } from "../../lib/api";

/** While something runs, the page asks again this often. */
const WHILE_RUNNING_MS = 4_000;

const underWay = (state: RunState | null | undefined): boolean =>
  state !== null && state !== undefined && !isOver(state);

const path = (projectId: string) => ({ params: { path: { projectId } } });

export const useProjects = () =>
  $api.useQuery("get", "/api/projects", undefined, {
    refetchInterval: ({ state }) =>
      state.data?.some((project) => underWay(project.lastRunState)) === true ? WHILE_RUNNING_MS : false,
  });

export const useProject = (projectId: string) =>
  $api.useQuery("get", "/api/projects/{projectId}", path(projectId));

export const useScenes = (projectId: string) =>
  $api.useQuery("get", "/api/projects/{projectId}/scenes", path(projectId), {
    refetchInterval: ({ state }) =>
      state.data?.some((scene) => underWay(scene.lastRun?.state)) === true ? WHILE_RUNNING_MS : false,
  });

export const useActivity = (projectId: string) =>
  $api.useQuery("get", "/api/projects/{projectId}/activity", path(projectId));

export const useMembers = () =>
  $api.useQuery("get", "/api/workspace/members", undefined, { staleTime: 60_000 });

/** Everything about projects and their scenes is asked anew after a change. */
const useRefresh = () => {
  const queryClient = useQueryClient();
  return () =>
    queryClient.invalidateQueries({
      predicate: ({ queryKey }) => typeof queryKey[1] === "string" && queryKey[1].startsWith("/api/projects"),
    });
};

export const useCreateProject = () => $api.useMutation("post", "/api/projects", { onSuccess: useRefresh() });

export const useUpdateProject = () =>
  $api.useMutation("patch", "/api/projects/{projectId}", { onSuccess: useRefresh() });

/** The deleted project itself is not asked for again: the page that shows it leaves. */
export function useDeleteProject() {
  const queryClient = useQueryClient();
  return $api.useMutation("delete", "/api/projects/{projectId}", {
    onSuccess: () => queryClient.invalidateQueries({ queryKey: ["get", "/api/projects"] }),
  });
}

export const useCreateScene = () =>
  $api.useMutation("post", "/api/projects/{projectId}/scenes", { onSuccess: useRefresh() });

export const useDeleteScene = () =>
  $api.useMutation("delete", "/api/scenes/{sceneId}", { onSuccess: useRefresh() });
