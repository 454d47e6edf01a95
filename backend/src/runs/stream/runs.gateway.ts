import { Logger, type BeforeApplicationShutdown } from "@nestjs/common";
import {
  MessageBody,
  ConnectedSocket,
  SubscribeMessage,
  WebSocketGateway,
  WebSocketServer,
  type OnGatewayConnection,
  type OnGatewayDisconnect,
  type OnGatewayInit,
} from "@nestjs/websockets";
import type { z } from "zod";
import { requirePermission } from "../../common/actor.js";
import { describeError } from "../../common/error.filter.js";
import { Refusal } from "../../common/refusal.js";
import { problemsOf } from "../../common/validation.js";
import { isOver } from "../../contract/runs.js";
import {
  CreditEvent,
  JoinRunEvent,
  STREAM_NAMESPACE,
  ViewEvent,
  type Done,
  type Joined,
  type Refusal as Refused,
  type TraceEvent,
} from "../../contract/socket.js";
import { Dispatcher } from "../live/dispatcher.js";
import { NoAnswer } from "../live/live-run.js";
import { ResultsService } from "../results.service.js";
import { RunsService } from "../runs.service.js";
import { RECHECK_MS, StreamDoor, type RunNamespace, type RunSocket } from "./stream-door.js";
import { StreamHub } from "./stream-hub.js";

const EVENTS = new Set(["join", "leave", "view", "credit"]);
const MAX_JOINED = 16;
/** Packets that may wait for a socket; a viewer further behind gets no traces or states until it has caught up. */
const MAX_BACKLOG = 32;

const roomOf = (runId: string): string => `run:${runId}`;
const logger = new Logger("Stream");

@WebSocketGateway({
  namespace: STREAM_NAMESPACE,
  transports: ["websocket"],
  serveClient: false,
  perMessageDeflate: false,
  httpCompression: false,
  maxHttpBufferSize: 16 * 1024,
})
export class RunsGateway
  implements OnGatewayInit, OnGatewayConnection, OnGatewayDisconnect, BeforeApplicationShutdown
{
  @WebSocketServer()
  readonly namespace!: RunNamespace;
  private recheck: NodeJS.Timeout | undefined;

  constructor(
    private readonly runs: RunsService,
    private readonly results: ResultsService,
    private readonly dispatcher: Dispatcher,
    private readonly hub: StreamHub,
    private readonly door: StreamDoor,
  ) {}

  afterInit(namespace: RunNamespace): void {
    this.door.guard(namespace);
    this.hub.bind({
      // One broadcast to many sockets is encoded once.
      frame: (viewerIds, runId, bytes) => void namespace.to([...viewerIds]).emit("frame", runId, bytes),
      traces: (runId, traces) => void this.toRoom(runId).emit("traces", { runId, traces }),
      state: (run) => void this.toRoom(run.id).emit("state", run),
    });
    this.recheck = setInterval(() => {
      this.door.recheck(namespace).catch((error: unknown) => logger.error(error));
    }, RECHECK_MS);
  }

  beforeApplicationShutdown(): void {
    clearInterval(this.recheck);
  }

  handleConnection(socket: RunSocket): void {
    this.door.attend(socket, EVENTS);
  }

  handleDisconnect(socket: RunSocket): void {
    for (const runId of this.hub.joinedRuns) this.hub.leave(runId, socket.id);
  }

  @SubscribeMessage("join")
  join(@ConnectedSocket() socket: RunSocket, @MessageBody() body: unknown): Promise<Joined> {
    return answering(async () => {
      const { runId } = parse(JoinRunEvent, body);
      const { actor } = socket.data;
      requirePermission(actor, "watch");
      const record = await this.runs.record(actor, runId);
      if (!this.hub.hasJoined(runId, socket.id)) {
        const joined = [...this.hub.joinedRuns].filter((id) => this.hub.hasJoined(id, socket.id));
        if (joined.length >= MAX_JOINED) {
          throw new Refusal("too-many", `This page watches ${MAX_JOINED} runs already: leave one of them.`);
        }
        // First into the room, then the history: increments may overlap with it and never leave a gap.
        await socket.join(roomOf(runId));
        this.hub.join(runId, socket.id);
      }
      const traces = await this.history(runId, isOver(record.state));
      return { run: await this.runs.toDto(await this.runs.record(actor, runId)), traces };
    });
  }

  @SubscribeMessage("leave")
  leave(@ConnectedSocket() socket: RunSocket, @MessageBody() body: unknown): Promise<Done> {
    return answering(async () => {
      const { runId } = parse(JoinRunEvent, body);
      await socket.leave(roomOf(runId));
      this.hub.leave(runId, socket.id);
      return {};
    });
  }

  @SubscribeMessage("view")
  view(@ConnectedSocket() socket: RunSocket, @MessageBody() body: unknown): Promise<Done> {
    return answering(async () => {
      const { runId, quantity, width, height, range, framesPerSecond } = parse(ViewEvent, body);
      if (!this.hub.hasJoined(runId, socket.id)) {
        throw new Refusal("wrong-state", "Join the run before asking for its frames.");
      }
      const run = await this.runs.record(socket.data.actor, runId);
      if (isOver(run.state) && !this.hub.hasThread(runId)) {
        throw new Refusal(
          "wrong-state",
          "The field of this ended run is no longer in memory: run the scene again to see it. Traces and result are kept.",
        );
      }
      const watching = this.hub.watch(runId, socket.id, {
        request: { quantity, width, height },
        range,
        framesPerSecond,
      });
      if (!watching.ok) throw new Refusal("bad-request", watching.sentence);
      return {};
    });
  }

  /** Not answered; what is malformed changes nothing. */
  @SubscribeMessage("credit")
  credit(@ConnectedSocket() socket: RunSocket, @MessageBody() body: unknown): void {
    const event = CreditEvent.safeParse(body);
    if (event.success) this.hub.credit(event.data.runId, socket.id, event.data.sequence);
  }

  /** Every sample so far: the thread's while there is one, else the kept result's. */
  private async history(runId: string, over: boolean): Promise<TraceEvent["traces"]> {
    const live = this.dispatcher.live(runId);
    if (live?.hasThread === true) {
      try {
        return await live.traces();
      } catch (error) {
        if (!(error instanceof NoAnswer)) throw error;
      }
    }
    return over ? await this.results.traces(runId) : [];
  }

  private toRoom(runId: string) {
    const behind: string[] = [];
    for (const socketId of this.namespace.adapter.rooms.get(roomOf(runId)) ?? []) {
      const { conn } = this.namespace.sockets.get(socketId) ?? {};
      if (conn !== undefined && backlogOf(conn) > MAX_BACKLOG) behind.push(socketId);
    }
    return this.namespace.to(roomOf(runId)).except(behind);
  }
}

/** Packets that the connection holds because the other end does not read. */
function backlogOf(connection: RunSocket["conn"]): number {
  const buffered: unknown = Reflect.get(connection, "writeBuffer");
  return Array.isArray(buffered) ? buffered.length : 0;
}

/** @throws Refusal "bad-request" with every problem of the event */
function parse<T extends z.ZodType>(schema: T, body: unknown): z.output<T> {
  const parsed = schema.safeParse(body);
  if (parsed.success) return parsed.data;
  const problems = problemsOf(parsed.error.issues);
  const first = problems.at(0);
  const where = first === undefined || first.path === "" ? "" : `${first.path}: `;
  throw new Refusal("bad-request", `The event does not fit: ${where}${first?.sentence ?? ""}`, { problems });
}

/** Turns what a handler gives or throws into the answer of its event. */
async function answering<T extends object>(work: () => Promise<T>): Promise<({ ok: true } & T) | Refused> {
  try {
    return { ok: true, ...(await work()) };
  } catch (error) {
    return { ok: false, error: describeError(error).body };
  }
}
