/**
 * One watched run over the socket: joins it again after every reconnection, asks for the view again, hands frames on
 * with the means to give their credit back, and joins anew where a trace has a gap. Holds no field data.
 */
import type {
  ClientToServerEvents,
  ErrorDto,
  RunDto,
  ServerToClientEvents,
  TraceEvent,
  ViewEvent,
} from "@heddle/backend/contract";
import type { Frame } from "@heddle/kernels/frames";

type TraceChunks = TraceEvent["traces"];
export type FrameView = Omit<ViewEvent, "runId">;

/** The part of a socket.io client that the stream needs; specs give their own. */
export interface StreamSocket {
  readonly connected: boolean;
  /** Whether it will try again by itself. */
  readonly active: boolean;
  connect(): unknown;
  disconnect(): unknown;
  on(event: "connect", listener: () => void): unknown;
  on(event: "disconnect", listener: (reason: string) => void): unknown;
  on(event: "connect_error", listener: (error: Error) => void): unknown;
  on<E extends keyof ServerToClientEvents>(event: E, listener: ServerToClientEvents[E]): unknown;
  emit<E extends keyof ClientToServerEvents>(event: E, ...args: Parameters<ClientToServerEvents[E]>): unknown;
}

export type Connection = { kind: "connecting" } | { kind: "live" } | { kind: "lost"; sentence: string };

export interface StreamListeners {
  onFrame: (frame: Frame, settle: () => void) => void;
  /** Every sample so far; replaces what was known. */
  onTracesFromStart: (runId: string, traces: TraceChunks) => void;
  /** More samples. False: there is a gap before them, so the stream joins again. */
  onTraces: (runId: string, traces: TraceChunks) => boolean;
  onState: (run: RunDto) => void;
  onConnection: (connection: Connection) => void;
  /** `during` tells what was refused: an ended run has no field any more, but still traces and a result. */
  onRefused: (error: ErrorDto, during: "join" | "view" | "frame") => void;
}

export interface RunStream {
  /** Watches a run, or none; leaves the one before. */
  watch(runId: string | null): void;
  /** Asks for frames of this kind and size, now and after every reconnection; null: none. */
  view(view: FrameView | null): void;
  close(): void;
}

const LOST = "The live stream is lost; trying to reach the server again. The run goes on without this page.";
const UNREADABLE: ErrorDto = {
  code: "bad-request",
  message: "The server sends frames that this page cannot read. Reload the page to get its newer version.",
};
/** After the server itself hung up or refused, socket.io does not try again by itself. */
const RETRY_MS = 2_000;

/**
 * @param decode the frame codec's decoder; what it throws is told through `onRefused`
 */
export function createRunStream(
  socket: StreamSocket,
  decode: (message: Uint8Array) => Frame,
  listeners: StreamListeners,
): RunStream {
  let watched: string | null = null;
  let joined = false;
  let joining = false;
  let wantedView: FrameView | null = null;
  let retry: ReturnType<typeof setTimeout> | null = null;
  let closed = false;

  const tryAgain = (): void => {
    if (retry !== null) clearTimeout(retry);
    if (!closed) retry = setTimeout(() => socket.connect(), RETRY_MS);
  };

  const sendView = (): void => {
    if (!joined || watched === null || wantedView === null || !socket.connected) return;
    socket.emit("view", { ...wantedView, runId: watched }, (answer) => {
      if (!answer.ok) listeners.onRefused(answer.error, "view");
    });
  };

  const join = (): void => {
    const runId = watched;
    if (runId === null || !socket.connected || joining) return;
    joining = true;
    socket.emit("join", { runId }, (answer) => {
      joining = false;
      if (closed) return;
      // Another run was asked for while this answer was on its way.
      if (runId !== watched) {
        join();
        return;
      }
      if (!answer.ok) {
        listeners.onRefused(answer.error, "join");
        return;
      }
      joined = true;
      listeners.onTracesFromStart(runId, answer.traces);
      listeners.onState(answer.run);
      sendView();
    });
  };

  socket.on("connect", () => {
    joined = false;
    joining = false;
    listeners.onConnection({ kind: "live" });
    join();
  });
  socket.on("disconnect", (reason) => {
    joined = false;
    joining = false;
    if (closed) return;
    listeners.onConnection({ kind: "lost", sentence: LOST });
    if (reason === "io server disconnect") tryAgain();
  });
  socket.on("connect_error", (error) => {
    // Refused by the server (a session that ended) rather than out of reach: its own sentence says more.
    listeners.onConnection({ kind: "lost", sentence: socket.active ? LOST : error.message || LOST });
    if (!socket.active) tryAgain();
  });
  socket.on("frame", (runId, message) => {
    if (runId !== watched) return;
    let frame: Frame;
    try {
      // A browser receives binary as an ArrayBuffer, whatever the other end sent.
      frame = decode(message instanceof Uint8Array ? message : new Uint8Array(message));
    } catch {
      listeners.onRefused(UNREADABLE, "frame");
      return;
    }
    listeners.onFrame(frame, () => {
      if (socket.connected && runId === watched) socket.emit("credit", { runId, sequence: frame.sequence });
    });
  });
  socket.on("traces", ({ runId, traces }) => {
    if (runId !== watched || !joined) return;
    if (!listeners.onTraces(runId, traces)) join();
  });
  socket.on("state", (run) => {
    if (run.id === watched) listeners.onState(run);
  });

  listeners.onConnection(socket.connected ? { kind: "live" } : { kind: "connecting" });
  if (!socket.connected) socket.connect();

  return {
    watch(runId) {
      if (runId === watched) return;
      const before = watched;
      if (before !== null && socket.connected) {
        socket.emit("leave", { runId: before }, () => undefined);
      }
      watched = runId;
      joined = false;
      join();
    },
    view(next) {
      wantedView = next;
      sendView();
    },
    close() {
      closed = true;
      if (retry !== null) clearTimeout(retry);
      socket.disconnect();
    },
  };
}
