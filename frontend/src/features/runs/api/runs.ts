import type { RunCommand, RunDto } from "@heddle/backend/contract";
import { isOver } from "@heddle/backend/contract";
import type { SolveResult } from "@heddle/kernels/scene";
import { resultSchema } from "@heddle/kernels/scene";
import type { QueryClient } from "@tanstack/react-query";
import { useQuery } from "@tanstack/react-query";
import { api, request } from "../../../lib/api";

export const runsKey = (sceneId: string) => ["runs", sceneId] as const;

/** The scene's runs, newest first; the stream keeps the watched one fresh. */
export const useRuns = (sceneId: string) =>
  useQuery<RunDto[]>({
    queryKey: runsKey(sceneId),
    queryFn: async ({ signal }) => {
      const { data } = await api.GET("/api/scenes/{sceneId}/runs", { params: { path: { sceneId } }, signal });
      return data ?? [];
    },
  });

/** The result document of a run that has one. It never changes, so it is asked for once. */
export const useResult = (run: RunDto | null) => {
  const id = run !== null && (run.state === "done" || run.state === "stopped") ? run.id : null;
  return useQuery<SolveResult>({
    queryKey: ["result", id],
    queryFn: ({ signal }) =>
      request("GET", `/api/runs/${String(id)}/result`, { answer: resultSchema, signal }),
    enabled: id !== null,
    staleTime: Number.POSITIVE_INFINITY,
  });
};

/** @throws {ApiError} */
export async function startRun(
  sceneId: string,
  body: {
    revision: number;
    paused: boolean;
    pacePsPerSecond: number | null;
    twoMesh: boolean;
    shielding: boolean;
  },
): Promise<RunDto> {
  const { data } = await api.POST("/api/scenes/{sceneId}/runs", { params: { path: { sceneId } }, body });
  return present(data);
}

/** @throws {ApiError} */
export async function commandRun(runId: string, command: RunCommand): Promise<RunDto> {
  const { data } = await api.POST("/api/runs/{runId}/commands", {
    params: { path: { runId } },
    body: command,
  });
  return present(data);
}

/** @throws {ApiError} */
export async function editRun(runId: string, document: Record<string, unknown>): Promise<{ step: number }> {
  const { data } = await api.POST("/api/runs/{runId}/edits", {
    params: { path: { runId } },
    body: { document },
  });
  return present(data);
}

/** The client throws for every refusal, so an answer without a body is the server's fault. */
function present<T>(data: T | undefined): T {
  if (data === undefined) throw new Error("The server answered without a body.");
  return data;
}

/**
 * Which of two accounts of one run is newer: answers to commands and events of the stream overtake each other, and a
 * run that is over never goes on, nor does its step count go back.
 */
export function newerOf(known: RunDto, told: RunDto): RunDto {
  if (isOver(known.state) && !isOver(told.state)) return known;
  return told.step >= known.step || isOver(told.state) ? told : known;
}

/** Puts a run's news into the scene's list. */
export function tellRun(client: QueryClient, told: RunDto): void {
  client.setQueryData<RunDto[]>(runsKey(told.sceneId), (list) => {
    if (list === undefined) return [told];
    return list.some((run) => run.id === told.id)
      ? list.map((run) => (run.id === told.id ? newerOf(run, told) : run))
      : [told, ...list];
  });
}
