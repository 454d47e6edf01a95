import type { ErrorDto, RunDto, TraceEvent } from "@heddle/backend/contract";
import type { Frame } from "@heddle/kernels/frames";
import { describe, expect, it, vi } from "vitest";
import type { Connection } from "./run-stream";
import { createRunStream } from "./run-stream";

const A = "11111111-1111-4111-8111-111111111111";
const B = "22222222-2222-4222-8222-222222222222";

/** A socket whose other end is this spec: what was emitted is kept, answers and events are given by hand. */
class FakeSocket {
  connected = false;
  active = true;
  readonly sent: {
    event: string;
    body: Record<string, unknown>;
    answer: ((a: unknown) => void) | undefined;
  }[] = [];
  private readonly listeners = new Map<string, ((...args: unknown[]) => void)[]>();
  on(event: string, listener: (...args: never[]) => void): void {
    const all = this.listeners.get(event) ?? [];
    all.push(listener as (...args: unknown[]) => void);
    this.listeners.set(event, all);
  }
  emit(event: string, body: unknown, answer?: unknown): void {
    this.sent.push({
      event,
      body: body as Record<string, unknown>,
      answer: answer as ((a: unknown) => void) | undefined,
    });
  }
  connect(): void {
    this.connected = true;
    this.receive("connect");
  }
  disconnect(): void {
    this.lose("io client disconnect");
  }
  lose(reason: string): void {
    this.connected = false;
    this.receive("disconnect", reason);
  }
  receive(event: string, ...args: unknown[]): void {
    for (const listener of this.listeners.get(event) ?? []) listener(...args);
  }
  of(event: string) {
    return this.sent.filter((entry) => entry.event === event);
  }
}

const run = (id: string): RunDto => ({ id, state: "running" }) as RunDto;
const decode = (message: Uint8Array): Frame => {
  const sequence = message.at(0);
  if (sequence === undefined) throw new RangeError("An empty message is no frame.");
  return {
    quantity: "Ez",
    width: 1,
    height: 1,
    step: 0,
    timeNs: 0,
    sequence,
    range: 1,
    peak: 1,
    levels: new Uint8Array(1),
  };
};

function setUp(onTraces = (): boolean => true) {
  const socket = new FakeSocket();
  const settles: (() => void)[] = [];
  const connections: Connection[] = [];
  const refusals: ErrorDto[] = [];
  const resets: [string, TraceEvent["traces"]][] = [];
  const states: RunDto[] = [];
  const stream = createRunStream(socket, decode, {
    onFrame: (_frame, settle) => settles.push(settle),
    onTracesFromStart: (runId, traces) => resets.push([runId, traces]),
    onTraces,
    onState: (state) => states.push(state),
    onConnection: (connection) => connections.push(connection),
    onRefused: (error) => refusals.push(error),
  });
  const answerJoin = (id: string): void =>
    socket
      .of("join")
      .at(-1)
      ?.answer?.({ ok: true, run: run(id), traces: [] });
  return { socket, stream, settles, connections, refusals, resets, states, answerJoin };
}

const view = { quantity: "Ez", width: 64, height: 64, range: null } as const;

describe("run stream", () => {
  it("asks for a view only once it has joined", () => {
    const { socket, stream, answerJoin } = setUp();
    stream.view(view);
    stream.watch(A);
    expect(socket.of("view")).toHaveLength(0);
    answerJoin(A);
    expect(socket.of("view").map((entry) => entry.body)).toEqual([{ ...view, runId: A }]);
  });

  it("gives a frame's credit back when it was drawn, not when it came", () => {
    const { socket, stream, settles, answerJoin } = setUp();
    stream.watch(A);
    answerJoin(A);
    socket.receive("frame", A, new Uint8Array([7]));
    expect(socket.of("credit")).toHaveLength(0);
    settles[0]?.();
    expect(socket.of("credit").map((entry) => entry.body)).toEqual([{ runId: A, sequence: 7 }]);
  });

  it("reads a frame that comes as an ArrayBuffer", () => {
    const { socket, stream, settles, answerJoin } = setUp();
    stream.watch(A);
    answerJoin(A);
    socket.receive("frame", A, new Uint8Array([3]).buffer);
    settles[0]?.();
    expect(socket.of("credit")[0]?.body).toEqual({ runId: A, sequence: 3 });
  });

  it("gives no credit for a run it has left, nor while disconnected", () => {
    const { socket, stream, settles, answerJoin } = setUp();
    stream.watch(A);
    answerJoin(A);
    socket.receive("frame", A, new Uint8Array([1]));
    stream.watch(B);
    settles[0]?.();
    expect(socket.of("credit")).toHaveLength(0);
    expect(socket.of("leave").map((entry) => entry.body)).toEqual([{ runId: A }]);
    socket.receive("frame", A, new Uint8Array([2]));
    expect(settles).toHaveLength(1);
  });

  it("joins and asks for the view again after a lost connection", () => {
    const { socket, stream, connections, resets, answerJoin } = setUp();
    stream.view(view);
    stream.watch(A);
    answerJoin(A);
    socket.lose("transport close");
    expect(connections.at(-1)?.kind).toBe("lost");
    socket.connect();
    expect(socket.of("join")).toHaveLength(2);
    answerJoin(A);
    expect(socket.of("view")).toHaveLength(2);
    expect(resets.map(([id]) => id)).toEqual([A, A]);
    expect(connections.at(-1)?.kind).toBe("live");
  });

  it("joins again where the traces have a gap", () => {
    const { socket, stream, answerJoin } = setUp(() => false);
    stream.watch(A);
    answerJoin(A);
    socket.receive("traces", { runId: A, traces: [] });
    socket.receive("traces", { runId: A, traces: [] });
    // The second gap falls into the first repair.
    expect(socket.of("join")).toHaveLength(2);
  });

  it("drops the answer for a run that is no longer watched and joins the wanted one", () => {
    const { socket, stream, resets } = setUp();
    stream.watch(A);
    const first = socket.of("join").at(0);
    stream.watch(B);
    first?.answer?.({ ok: true, run: run(A), traces: [] });
    expect(resets).toHaveLength(0);
    expect(socket.of("join").at(-1)?.body).toEqual({ runId: B });
  });

  it("tells refusals and unreadable frames as sentences", () => {
    const { socket, stream, refusals } = setUp();
    stream.watch(A);
    socket.of("join")[0]?.answer?.({ ok: false, error: { code: "not-found", message: "No such run." } });
    socket.receive("frame", A, new Uint8Array(0));
    expect(refusals.map((error) => error.code)).toEqual(["not-found", "bad-request"]);
  });

  it("connects again by itself after the server hung up, unless closed", () => {
    vi.useFakeTimers();
    try {
      const { socket, stream } = setUp();
      socket.lose("io server disconnect");
      vi.advanceTimersByTime(2_500);
      expect(socket.connected).toBe(true);
      stream.close();
      vi.advanceTimersByTime(10_000);
      expect(socket.connected).toBe(false);
    } finally {
      vi.useRealTimers();
    }
  });
});
