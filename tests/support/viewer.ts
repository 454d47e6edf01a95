/** A viewer of the stream: joins runs, acknowledges frames as a page does, and remembers what it saw. */
import { io, type Socket } from "socket.io-client";
import {
  STREAM_NAMESPACE,
  type ClientToServerEvents,
  type Done,
  type Joined,
  type RunDto,
  type ServerToClientEvents,
  type TraceEvent,
  type ViewEvent,
} from "@heddle/backend/contract";
import { decodeFrame, type Frame } from "@heddle/kernels/frames";

export interface Viewer {
  socket: Socket<ServerToClientEvents, ClientToServerEvents>;
  frames: Frame[];
  states: RunDto[];
  traces: TraceEvent[];
  join: (runId: string) => Promise<Joined>;
  view: (view: ViewEvent) => Promise<Done>;
  close: () => void;
}

/** @throws the server's refusal of the handshake, whose `data` is its ErrorDto */
export function openViewer(
  url: string,
  options: { cookie: string; origin?: string; keepFrames?: number },
): Promise<Viewer> {
  const socket: Viewer["socket"] = io(`${url}${STREAM_NAMESPACE}`, {
    transports: ["websocket"],
    reconnection: false,
    forceNew: true,
    extraHeaders: { cookie: options.cookie, ...(options.origin && { origin: options.origin }) },
  });
  const { keepFrames = 1_000 } = options;
  const viewer: Viewer = {
    socket,
    frames: [],
    states: [],
    traces: [],
    join: (runId) => socket.timeout(15_000).emitWithAck("join", { runId }),
    view: (view) => socket.timeout(15_000).emitWithAck("view", view),
    close: () => {
      socket.disconnect();
    },
  };
  socket.on("frame", (runId, message) => {
    const frame = decodeFrame(new Uint8Array(message));
    viewer.frames.push(frame);
    if (viewer.frames.length > keepFrames) viewer.frames.shift();
    socket.emit("credit", { runId, sequence: frame.sequence });
  });
  socket.on("state", (run) => viewer.states.push(run));
  socket.on("traces", (event) => viewer.traces.push(event));
  return new Promise((resolve, reject) => {
    socket.once("connect", () => resolve(viewer));
    socket.once("connect_error", (error) => {
      socket.disconnect();
      reject(error);
    });
  });
}

/** Waits until `holds` gives something true. */
export async function until<T>(holds: () => T | Promise<T>, withinMs = 20_000): Promise<NonNullable<T>> {
  const end = Date.now() + withinMs;
  for (;;) {
    const found = await holds();
    if (found !== null && found !== undefined && found !== false) return found;
    if (Date.now() > end) throw new Error(`It did not come about within ${withinMs} ms: ${String(holds)}`);
    await new Promise((resolve) => setTimeout(resolve, 10));
  }
}
