/**
 * Who watches a run, in which view, and who may be sent a frame now. It asks the run's thread for a frame only
 * while someone can take one, sends each encoded frame to everybody of that view who can, and keeps nothing
 * back: a viewer that owes acknowledgements misses frames, no one else does, and nothing queues.
 */
import { FRAME_CREDITS } from "../../contract/socket.js";
import type { ThreadFrame, ThreadView, ToThread } from "../worker/protocol.js";

export interface ViewWish {
  request: ThreadView["request"];
  range: number | null;
  framesPerSecond: number;
}

export interface ViewBookDoors {
  /** To the run's thread; dropped where the run has none. */
  ask: (message: ToThread) => void;
  send: (viewerIds: readonly string[], bytes: Uint8Array) => void;
  now: () => number;
  /** Calls back after `ms`; gives a way to call it off. */
  later: (ms: number, then: () => void) => () => void;
}

/** Different views of one run at a time; each costs the solver an encoding per frame. */
export const MAX_VIEWS = 16;
/** Viewers due within this share of their interval ride along with a frame that is ready. */
const EARLY_SHARE = 0.25;

interface View {
  view: ThreadView;
  viewers: Set<string>;
  /** `newerThan` of the frame that was asked for and has not come. */
  asked: number | null;
  callOff: (() => void) | null;
}

interface Viewer {
  view: View;
  intervalMs: number;
  dueAtMs: number;
  /** Sequences on their way to the viewer. */
  unacknowledged: number[];
  /** Version of the field that the viewer saw last in this view. */
  seen: number;
}

export class ViewBook {
  private readonly views = new Map<string, View>();
  private readonly byId = new Map<number, View>();
  private readonly viewers = new Map<string, Viewer>();
  private nextViewId = 1;

  constructor(private readonly doors: ViewBookDoors) {}

  get watched(): boolean {
    return this.viewers.size > 0;
  }

  /** Replaces the viewer's earlier view. False where the run has as many different views as it may. */
  watch(viewerId: string, wish: ViewWish): boolean {
    const key = JSON.stringify([wish.request.quantity, wish.request.width, wish.request.height, wish.range]);
    const earlier = this.viewers.get(viewerId);
    const goes =
      earlier !== undefined && earlier.view.viewers.size === 1 && earlier.view !== this.views.get(key);
    if (!this.views.has(key) && this.views.size - (goes ? 1 : 0) >= MAX_VIEWS) return false;

    const view = this.views.get(key) ?? this.open(key, wish);
    if (earlier !== undefined && earlier.view !== view) this.leaveView(viewerId, earlier.view);
    view.viewers.add(viewerId);
    this.viewers.set(viewerId, {
      view,
      intervalMs: 1000 / wish.framesPerSecond,
      dueAtMs: this.doors.now(),
      // What is on its way stays owed: changing views quickly buys no credit.
      unacknowledged: earlier?.unacknowledged ?? [],
      seen: earlier?.view === view ? earlier.seen : -1,
    });
    this.update(view);
    return true;
  }

  unwatch(viewerId: string): void {
    const viewer = this.viewers.get(viewerId);
    if (viewer === undefined) return;
    this.viewers.delete(viewerId);
    this.leaveView(viewerId, viewer.view);
  }

  /** The viewer has drawn this frame and with it every earlier one. */
  credit(viewerId: string, sequence: number): void {
    const viewer = this.viewers.get(viewerId);
    if (viewer === undefined) return;
    viewer.unacknowledged = viewer.unacknowledged.filter((sent) => sent > sequence);
    this.update(viewer.view);
  }

  /** A frame came from the thread. */
  deliver(frame: ThreadFrame): void {
    const view = this.byId.get(frame.viewId);
    if (view === undefined) return;
    view.asked = null;
    const nowMs = this.doors.now();
    const takers: string[] = [];
    for (const viewerId of view.viewers) {
      const viewer = this.viewers.get(viewerId);
      if (viewer === undefined || viewer.seen >= frame.version || !hasCredit(viewer)) continue;
      if (viewer.dueAtMs - nowMs > EARLY_SHARE * viewer.intervalMs) continue;
      viewer.seen = frame.version;
      viewer.unacknowledged.push(frame.sequence);
      // Counted from when it was due, so that the rate is kept; not from so long ago that it would catch up.
      viewer.dueAtMs = Math.max(viewer.dueAtMs, nowMs - viewer.intervalMs) + viewer.intervalMs;
      takers.push(viewerId);
    }
    if (takers.length > 0) this.doors.send(takers, frame.bytes);
    this.update(view);
  }

  /** The run has a thread now (again): it must learn the views and what is wanted. */
  attach(): void {
    for (const viewer of this.viewers.values()) viewer.seen = -1;
    for (const view of this.views.values()) {
      view.asked = null;
      this.doors.ask({ kind: "view", view: view.view });
      this.update(view);
    }
  }

  close(): void {
    for (const view of this.views.values()) view.callOff?.();
    this.views.clear();
    this.byId.clear();
    this.viewers.clear();
  }

  private open(key: string, wish: ViewWish): View {
    const viewId = this.nextViewId++;
    const view: View = {
      view: { viewId, request: wish.request, range: wish.range },
      viewers: new Set(),
      asked: null,
      callOff: null,
    };
    this.views.set(key, view);
    this.byId.set(viewId, view);
    this.doors.ask({ kind: "view", view: view.view });
    return view;
  }

  private leaveView(viewerId: string, view: View): void {
    view.viewers.delete(viewerId);
    if (view.viewers.size > 0) return;
    view.callOff?.();
    this.byId.delete(view.view.viewId);
    for (const [key, one] of this.views) if (one === view) this.views.delete(key);
    this.doors.ask({ kind: "forget-view", viewId: view.view.viewId });
  }

  /** Asks for a frame if someone can take one now; else comes back when someone will. */
  private update(view: View): void {
    view.callOff?.();
    view.callOff = null;
    const nowMs = this.doors.now();
    let newerThan = Number.POSITIVE_INFINITY;
    let soonestMs = Number.POSITIVE_INFINITY;
    for (const viewerId of view.viewers) {
      const viewer = this.viewers.get(viewerId);
      if (viewer === undefined || !hasCredit(viewer)) continue;
      if (viewer.dueAtMs <= nowMs) newerThan = Math.min(newerThan, viewer.seen);
      else soonestMs = Math.min(soonestMs, viewer.dueAtMs);
    }
    if (newerThan < (view.asked ?? Number.POSITIVE_INFINITY)) {
      view.asked = newerThan;
      this.doors.ask({ kind: "want", viewId: view.view.viewId, newerThan });
    }
    if (view.asked === null && soonestMs < Number.POSITIVE_INFINITY) {
      view.callOff = this.doors.later(soonestMs - nowMs, () => this.update(view));
    }
  }
}

const hasCredit = (viewer: Viewer): boolean => viewer.unacknowledged.length < FRAME_CREDITS;
