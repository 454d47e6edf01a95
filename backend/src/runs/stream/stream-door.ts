/** Who may open a socket, and how long it stays theirs. */
import { Injectable } from "@nestjs/common";
import type { DefaultEventsMap, Namespace, Socket } from "socket.io";
import { AuthService } from "../../auth/auth.service.js";
import type { Actor } from "../../common/actor.js";
import { describeError } from "../../common/error.filter.js";
import { OriginPolicy } from "../../common/origin-policy.js";
import { notSignedIn, Refusal } from "../../common/refusal.js";
import type { ErrorDto } from "../../contract/errors.js";
import type { ClientToServerEvents, ServerToClientEvents } from "../../contract/socket.js";
import { EventAllowance } from "./event-allowance.js";

export interface SocketData {
  actor: Actor;
}
export type RunSocket = Socket<ClientToServerEvents, ServerToClientEvents, DefaultEventsMap, SocketData>;
export type RunNamespace = Namespace<
  ClientToServerEvents,
  ServerToClientEvents,
  DefaultEventsMap,
  SocketData
>;

/** Sockets that one person may hold. */
export const MAX_SOCKETS_PER_PERSON = 40;
/** An ended session or a lost membership closes its sockets within this time. */
export const RECHECK_MS = 20_000;

/** A refusal as a socket's client sees it: `error.data` is the contract's ErrorDto. */
class ConnectRefused extends Error {
  readonly data: ErrorDto;
  constructor(refusal: ErrorDto) {
    super(refusal.message);
    this.data = refusal;
  }
}

type Answer = (answer: { ok: false; error: ErrorDto }) => void;
const isAnswer = (parameter: unknown): parameter is Answer => typeof parameter === "function";

@Injectable()
export class StreamDoor {
  constructor(
    private readonly auth: AuthService,
    private readonly origins: OriginPolicy,
  ) {}

  guard(namespace: RunNamespace): void {
    namespace.use((socket, next) => {
      this.admit(namespace, socket).then(
        () => next(),
        (error: unknown) => next(new ConnectRefused(describeError(error).body)),
      );
    });
  }

  /** Watches a socket that was let in: its rate of events, and unknown events that no handler would answer. */
  attend(socket: RunSocket, known: ReadonlySet<string>): void {
    const allowance = new EventAllowance();
    socket.use(([event, ...parameters], next) => {
      const answer: unknown = parameters.at(-1);
      const refuse = (error: ErrorDto): void => {
        if (isAnswer(answer)) answer({ ok: false, error });
      };
      const taken = allowance.take();
      if (taken === "hopeless") socket.disconnect(true);
      else if (taken === "over") {
        refuse({ code: "too-many", message: "This page sends more than the server takes: wait a second." });
      } else if (!known.has(event)) {
        refuse({ code: "bad-request", message: "The server knows no such event: reload the page." });
      } else next();
    });
  }

  /** Closes the sockets of sessions that have ended. */
  async recheck(namespace: RunNamespace): Promise<void> {
    const sockets = [...namespace.sockets.values()];
    const actors = new Map<string, Promise<Actor | null>>();
    await Promise.all(
      sockets.map(async (socket) => {
        const { headers } = socket.handshake;
        const cookie = headers.cookie ?? "";
        const known = actors.get(cookie) ?? this.auth.actorOf(headers, { only: true });
        actors.set(cookie, known);
        const actor = await known;
        if (actor?.workspace.id !== socket.data.actor.workspace.id) socket.disconnect(true);
        else socket.data.actor = actor;
      }),
    );
  }

  private async admit(namespace: RunNamespace, socket: RunSocket): Promise<void> {
    const { headers } = socket.handshake;
    if (!this.origins.allows(headers)) {
      throw new Refusal(
        "not-allowed",
        "This page does not belong to the server: open Heddle at its own address.",
      );
    }
    const actor = await this.auth.actorOf(headers);
    if (actor === null) throw notSignedIn();
    const own = [...namespace.sockets.values()].filter((one) => one.data.actor.person.id === actor.person.id);
    if (own.length >= MAX_SOCKETS_PER_PERSON) {
      throw new Refusal("too-many", "You watch in more windows than the server serves: close some of them.");
    }
    socket.data.actor = actor;
  }
}
