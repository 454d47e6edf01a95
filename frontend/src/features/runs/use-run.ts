import type {
  ClientToServerEvents,
  ProblemDto,
  RunCommand,
  RunDto,
  ServerToClientEvents,
} from "@heddle/backend/contract";
import { isOver, STREAM_NAMESPACE } from "@heddle/backend/contract";
import { decodeFrame } from "@heddle/kernels/frames";
import { useQueryClient } from "@tanstack/react-query";
import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import type { Socket } from "socket.io-client";
import { io } from "socket.io-client";
import { ApiError, sentenceOf } from "../../lib/api";
import { commandRun, editRun, startRun, tellRun, useRuns } from "./api/runs";
import { createLatestWins } from "./latest-wins";
import type { Connection, FrameView, RunStream, StreamListeners } from "./run-stream";
import { createRunStream } from "./run-stream";

/** Live edits go out at most this often, so that the field answers a stroke within 200 ms and the server keeps up. */
const EDIT_INTERVAL_MS = 120;

/** The slider gives a pace with every pixel; the run hears of it this often. */
const PACE_INTERVAL_MS = 60;

export interface RunNotice {
  sentence: string;
  problems: readonly ProblemDto[];
}

/** Where frames and traces go: outside React, and kept the same for the life of the page. */
export type RunSinks = Pick<StreamListeners, "onFrame" | "onTracesFromStart" | "onTraces">;

export interface UseRunOptions {
  sceneId: string;
  sinks: RunSinks;
  /** The frames wanted; null: none. */
  view: FrameView | null;
  /** Saves what is drawn and gives the revision to run; null where it could not be saved. */
  save: () => Promise<number | null>;
}

export interface StartOptions {
  /** Waits before its first step. */
  paused?: boolean;
  /** Solves the scene on a finer mesh, too. */
  twoMesh?: boolean;
  /** Solves the scene without its patches marked as a shield, too. */
  shielding?: boolean;
}

export interface RunHandle {
  /** The scene's latest run, null before there is one. */
  run: RunDto | null;
  /** Every run known, newest first. */
  runs: readonly RunDto[];
  loading: boolean;
  connection: Connection;
  /** The run is over and its field is no longer in the server's memory. */
  fieldGone: boolean;
  /** A command is on its way. */
  busy: boolean;
  notice: RunNotice | null;
  dismissNotice: () => void;
  /** The pace to start with and to go on with; null: as fast as the server goes. */
  pace: number | null;
  start: (options?: StartOptions) => void;
  /** Stops the run under way, if any, and runs the scene as it is drawn from its first step. */
  runCleanly: () => void;
  command: (command: RunCommand) => void;
  setPace: (pace: number | null) => void;
  /** Gives the drawing as it stands to the run, if one is under way. The latest wins. */
  edit: (document: Record<string, unknown>) => void;
}

const noticeOf = (error: unknown): RunNotice => ({
  sentence: sentenceOf(error),
  problems: error instanceof ApiError ? error.problems : [],
});

/** The scene's latest run: found again after a reload, started, steered, edited and watched. */
export function useRun({ sceneId, sinks, view, save }: UseRunOptions): RunHandle {
  const client = useQueryClient();
  const query = useRuns(sceneId);
  const runs = useMemo(() => query.data ?? [], [query.data]);
  const run = runs.at(0) ?? null;
  const runId = run?.id ?? null;
  const [connection, setConnection] = useState<Connection>({ kind: "connecting" });
  const [notice, setNotice] = useState<RunNotice | null>(null);
  const [busy, setBusy] = useState(false);
  /** The run whose field is no longer in the server's memory. */
  const [goneRun, setGoneRun] = useState<string | null>(null);
  const [chosenPace, setChosenPace] = useState<number | null>(null);
  const stream = useRef<RunStream | null>(null);
  const wanted = useRef({ runId, view });

  useEffect(() => {
    const socket: Socket<ServerToClientEvents, ClientToServerEvents> = io(STREAM_NAMESPACE, {
      transports: ["websocket"],
      autoConnect: false,
    });
    const made = createRunStream(socket, decodeFrame, {
      ...sinks,
      onState: (told) => {
        tellRun(client, told);
      },
      onConnection: setConnection,
      onRefused: (error, during) => {
        // An ended run keeps no field for long; the sheet then says so itself.
        if (during === "view" && error.code === "wrong-state") {
          setGoneRun(wanted.current.runId);
          return;
        }
        setNotice({ sentence: error.message, problems: error.problems ?? [] });
      },
    });
    stream.current = made;
    made.view(wanted.current.view);
    made.watch(wanted.current.runId);
    return () => {
      stream.current = null;
      made.close();
    };
  }, [client, sinks]);

  useEffect(() => {
    wanted.current = { runId, view };
    stream.current?.view(view);
    stream.current?.watch(runId);
  }, [runId, view]);

  const acting = useRef(false);
  const act = useCallback(
    async (action: () => Promise<void>) => {
      // A second click while the first is on its way asks for nothing new.
      if (acting.current) return;
      acting.current = true;
      setBusy(true);
      setNotice(null);
      try {
        await action();
      } catch (error) {
        setNotice(noticeOf(error));
      } finally {
        acting.current = false;
        setBusy(false);
      }
    },
    [setNotice, setBusy],
  );

  const begin = useCallback(
    async ({ paused = false, twoMesh = false, shielding = false }: StartOptions) => {
      const revision = await save();
      if (revision === null) return;
      const body = { revision, paused, pacePsPerSecond: chosenPace, twoMesh, shielding };
      tellRun(client, await startRun(sceneId, body));
    },
    [save, sceneId, chosenPace, client],
  );

  const start = useCallback(
    (options: StartOptions = {}) => {
      void act(() => begin(options));
    },
    [act, begin],
  );

  const live = run !== null && !isOver(run.state);
  const runCleanly = useCallback(() => {
    void act(async () => {
      if (live && runId !== null) tellRun(client, await commandRun(runId, { kind: "stop" }));
      await begin({});
    });
  }, [act, begin, live, runId, client]);

  const command = useCallback(
    (wantedCommand: RunCommand) => {
      if (runId === null) return;
      void act(async () => {
        tellRun(client, await commandRun(runId, wantedCommand));
      });
    },
    [act, runId, client],
  );

  // Not through `act`: a pace on its way must not swallow the command that is given next.
  const paces = useMemo(
    () =>
      createLatestWins<{ runId: string; pace: number | null }>(async (asked) => {
        try {
          tellRun(client, await commandRun(asked.runId, { kind: "pace", picosecondsPerSecond: asked.pace }));
        } catch (error) {
          if (error instanceof ApiError && error.code === "wrong-state") return;
          setNotice(noticeOf(error));
        }
      }, PACE_INTERVAL_MS),
    [client, setNotice],
  );
  useEffect(
    () => () => {
      paces.cancel();
    },
    [paces],
  );

  const setPace = useCallback(
    (pace: number | null) => {
      setChosenPace(pace);
      if (live && runId !== null) paces.push({ runId, pace });
    },
    [live, runId, paces, setChosenPace],
  );

  const edits = useMemo(
    () =>
      createLatestWins<{ runId: string; document: Record<string, unknown> }>(async (edit) => {
        try {
          await editRun(edit.runId, edit.document);
          setNotice(null);
        } catch (error) {
          // A run that ended while the stroke was on its way needs no telling: its state says so.
          if (error instanceof ApiError && error.code === "wrong-state") return;
          setNotice(noticeOf(error));
        }
      }, EDIT_INTERVAL_MS),
    [setNotice],
  );
  useEffect(
    () => () => {
      edits.cancel();
    },
    [edits],
  );

  const edit = useCallback(
    (document: Record<string, unknown>) => {
      if (live && runId !== null) edits.push({ runId, document });
    },
    [live, runId, edits],
  );

  return {
    run,
    runs,
    loading: query.isPending,
    connection,
    fieldGone: runId !== null && goneRun === runId,
    busy,
    notice: notice ?? (query.isError ? noticeOf(query.error) : null),
    dismissNotice: () => {
      setNotice(null);
    },
    pace: live ? run.pacePsPerSecond : chosenPace,
    start,
    runCleanly,
    command,
    setPace,
    edit,
  };
}
