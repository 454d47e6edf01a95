import { ActivityDto, MemberDto, ProjectDto, SceneDto, SceneSummaryDto } from "@heddle/backend/contract";
import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { z } from "zod";
import { request } from "../../lib/api";

const PROJECTS = ["projects"] as const;
const scenesKey = (projectId: string) => ["projects", projectId, "scenes"] as const;

export const useProjects = () =>
  useQuery({
    queryKey: PROJECTS,
    queryFn: ({ signal }) => request("GET", "/api/projects", { answer: z.array(ProjectDto), signal }),
  });

export const useProject = (projectId: string) =>
  useQuery({
    queryKey: ["projects", projectId],
    queryFn: ({ signal }) => request("GET", `/api/projects/${projectId}`, { answer: ProjectDto, signal }),
  });

export const useScenes = (projectId: string) =>
  useQuery({
    queryKey: scenesKey(projectId),
    queryFn: ({ signal }) =>
      request("GET", `/api/projects/${projectId}/scenes`, { answer: z.array(SceneSummaryDto), signal }),
  });

export const useActivity = (projectId: string) =>
  useQuery({
    queryKey: ["projects", projectId, "activity"],
    queryFn: ({ signal }) =>
      request("GET", `/api/projects/${projectId}/activity`, { answer: z.array(ActivityDto), signal }),
  });

export const useMembers = () =>
  useQuery({
    queryKey: ["members"],
    queryFn: ({ signal }) => request("GET", "/api/workspace/members", { answer: z.array(MemberDto), signal }),
    staleTime: 60_000,
  });

/** Everything under "projects" is asked anew after a change. */
const useRefresh = () => {
  const queryClient = useQueryClient();
  return () => queryClient.invalidateQueries({ queryKey: PROJECTS });
};

export function useCreateProject() {
  const refresh = useRefresh();
  return useMutation({
    mutationFn: (body: { name: string; example?: string }) =>
      request("POST", "/api/projects", { body, answer: ProjectDto }),
    onSuccess: refresh,
  });
}

export function useUpdateProject(projectId: string) {
  const refresh = useRefresh();
  return useMutation({
    mutationFn: (body: { name?: string; notes?: string }) =>
      request("PATCH", `/api/projects/${projectId}`, { body, answer: ProjectDto }),
    onSuccess: refresh,
  });
}

export function useDeleteProject(projectId: string) {
  const refresh = useRefresh();
  return useMutation({
    mutationFn: () => request("DELETE", `/api/projects/${projectId}`),
    onSuccess: refresh,
  });
}

export interface NewScene {
  name?: string;
  document?: Record<string, unknown>;
  example?: string;
}

export function useCreateScene(projectId: string) {
  const refresh = useRefresh();
  return useMutation({
    mutationFn: (body: NewScene) =>
      request("POST", `/api/projects/${projectId}/scenes`, { body, answer: SceneDto }),
    onSuccess: refresh,
  });
}
