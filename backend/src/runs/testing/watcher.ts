/** A viewer for specs: a socket of the stream with its session, and what it has seen. */
import { io, type Socket } from "socket.io-client";
import { decodeFrame, type Frame } from "@heddle/kernels/frames";
import type { RunDto } from "../../contract/runs.js";
import {
  STREAM_NAMESPACE,
  type ClientToServerEvents,
  type ServerToClientEvents,
  type TraceEvent,
} from "../../contract/socket.js";

export interface Watcher {
  socket: Socket<ServerToClientEvents, ClientToServerEvents>;
  frames: Frame[];
  states: RunDto[];
  traces: TraceEvent[];
  /** Sends any event with any body, as a broken page would, and gives the server's answer. */
  ask: (event: string, body?: unknown) => Promise<unknown>;
  close: () => void;
}

export interface WatcherOptions {
  cookie?: string;
  origin?: string;
  /** Acknowledge each frame as it comes; otherwise the viewer never does. */
  credits?: boolean;
}

/** @throws what the server says to a handshake that it refuses: an Error whose `data` is its ErrorDto */
export function openWatcher(url: string, options: WatcherOptions): Promise<Watcher> {
  const headers: Record<string, string> = {};
  if (options.cookie !== undefined) headers.cookie = options.cookie;
  if (options.origin !== undefined) headers.origin = options.origin;
  const socket: Watcher["socket"] = io(`${url}${STREAM_NAMESPACE}`, {
    transports: ["websocket"],
    reconnection: false,
    forceNew: true,
    extraHeaders: headers,
  });
  const watcher: Watcher = {
    socket,
    frames: [],
    states: [],
    traces: [],
    ask: (event, body) =>
      socket.timeout(5_000).emitWithAck(event as "leave", body as { runId: string }) as Promise<unknown>,
    close: () => {
      socket.disconnect();
    },
  };
  socket.on("frame", (runId, message) => {
    const frame = decodeFrame(new Uint8Array(message));
    watcher.frames.push(frame);
    if (options.credits === true) socket.emit("credit", { runId, sequence: frame.sequence });
  });
  socket.on("state", (run) => watcher.states.push(run));
  socket.on("traces", (event) => watcher.traces.push(event));
  return new Promise((resolve, reject) => {
    socket.once("connect", () => resolve(watcher));
    socket.once("connect_error", (error) => {
      socket.disconnect();
      reject(error);
    });
  });
}

/** Waits until `holds` gives something true. */
export async function until<T>(holds: () => T | Promise<T>, withinMs = 8_000): Promise<NonNullable<T>> {
  const end = Date.now() + withinMs;
  for (;;) {
    const found = await holds();
    if (found !== null && found !== undefined && found !== false) return found;
    if (Date.now() > end) throw new Error(`It did not come about within ${withinMs} ms: ${String(holds)}`);
    await new Promise((resolve) => setTimeout(resolve, 10));
  }
}
