import type { RunCommand } from "@heddle/backend/contract";
import { isOver, LiveEditDto, RunDto } from "@heddle/backend/contract";
import type { SolveResult } from "@heddle/kernels/scene";
import { resultSchema } from "@heddle/kernels/scene";
import type { QueryClient } from "@tanstack/react-query";
import { useQuery } from "@tanstack/react-query";
import { z } from "zod";
import { request } from "../../../lib/api";

export const runsKey = (sceneId: string) => ["runs", sceneId] as const;

const RunList = z.array(RunDto);

/** The scene's runs, newest first; the stream keeps the watched one fresh. */
export const useRuns = (sceneId: string) =>
  useQuery({
    queryKey: runsKey(sceneId),
    queryFn: ({ signal }) => request("GET", `/api/scenes/${sceneId}/runs`, { answer: RunList, signal }),
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

export const startRun = (sceneId: string, body: { revision: number; paused: boolean }): Promise<RunDto> =>
  request("POST", `/api/scenes/${sceneId}/runs`, { body, answer: RunDto });

export const commandRun = (runId: string, command: RunCommand): Promise<RunDto> =>
  request("POST", `/api/runs/${runId}/commands`, { body: command, answer: RunDto });

export const editRun = (runId: string, document: unknown): Promise<LiveEditDto> =>
  request("POST", `/api/runs/${runId}/edits`, { body: { document }, answer: LiveEditDto });

type LiveEditDto = z.infer<typeof LiveEditDto>;

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
