/**
 * Between the runs' threads and the viewers' sockets: one view book per watched run. It knows neither threads nor
 * sockets, only ways to ask one and to send to the other.
 */
import { Injectable } from "@nestjs/common";
import type { RunDto } from "../../contract/runs.js";
import type { FieldQuantity } from "@heddle/kernels/frames";
import type { ThreadFrame, ToThread, TraceChunk } from "../worker/protocol.js";
import { ViewBook, type ViewWish } from "./view-book.js";

/** Ways out to the sockets; the gateway gives them. */
export interface StreamOut {
  frame: (viewerIds: readonly string[], runId: string, bytes: Uint8Array) => void;
  traces: (runId: string, traces: TraceChunk[]) => void;
  state: (run: RunDto) => void;
}

interface Thread {
  ask: (message: ToThread) => void;
  quantities: readonly FieldQuantity[];
}

export type Watching = { ok: true } | { ok: false; sentence: string };

@Injectable()
export class StreamHub {
  private readonly books = new Map<string, ViewBook>();
  private readonly threads = new Map<string, Thread>();
  private readonly joined = new Map<string, Set<string>>();
  private out: StreamOut | null = null;

  bind(out: StreamOut): void {
    this.out = out;
  }

  join(runId: string, viewerId: string): void {
    const viewers = this.joined.get(runId) ?? new Set();
    viewers.add(viewerId);
    this.joined.set(runId, viewers);
  }

  leave(runId: string, viewerId: string): void {
    const viewers = this.joined.get(runId);
    viewers?.delete(viewerId);
    if (viewers?.size === 0) this.joined.delete(runId);
    const book = this.books.get(runId);
    if (book === undefined) return;
    book.unwatch(viewerId);
    if (book.watched) return;
    book.close();
    this.books.delete(runId);
  }

  hasJoined = (runId: string, viewerId: string): boolean => this.joined.get(runId)?.has(viewerId) ?? false;

  /** Runs that anyone looks at. */
  get joinedRuns(): ReadonlySet<string> {
    return new Set(this.joined.keys());
  }

  /** A run that still waits has no thread: its viewers' wishes are kept until it starts. */
  watch(runId: string, viewerId: string, wish: ViewWish): Watching {
    const thread = this.threads.get(runId);
    const { quantity } = wish.request;
    if (thread !== undefined && !thread.quantities.includes(quantity)) {
      return {
        ok: false,
        sentence: `This run has no ${quantity}: ask for one of ${thread.quantities.join(", ")}.`,
      };
    }
    const book = this.books.get(runId) ?? this.open(runId);
    if (book.watch(viewerId, wish)) return { ok: true };
    return {
      ok: false,
      sentence:
        "This run is watched in as many different views as it can serve: choose a view that someone has.",
    };
  }

  credit(runId: string, viewerId: string, sequence: number): void {
    this.books.get(runId)?.credit(viewerId, sequence);
  }

  /** The run's thread can serve frames from now on. */
  attach(runId: string, thread: Thread): void {
    this.threads.set(runId, thread);
    this.books.get(runId)?.attach();
  }

  detach(runId: string): void {
    this.threads.delete(runId);
  }

  hasThread = (runId: string): boolean => this.threads.has(runId);

  deliver(runId: string, frame: ThreadFrame): void {
    this.books.get(runId)?.deliver(frame);
  }

  traces(runId: string, traces: TraceChunk[]): void {
    if (this.joined.has(runId)) this.out?.traces(runId, traces);
  }

  state(run: RunDto): void {
    if (this.joined.has(run.id)) this.out?.state(run);
  }

  private open(runId: string): ViewBook {
    const book = new ViewBook({
      ask: (message) => this.threads.get(runId)?.ask(message),
      send: (viewerIds, bytes) => this.out?.frame(viewerIds, runId, bytes),
      now: () => performance.now(),
      later: (ms, then) => {
        const timer = setTimeout(then, ms);
        return () => clearTimeout(timer);
      },
    });
    this.books.set(runId, book);
    return book;
  }
}
