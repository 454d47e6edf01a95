/**
 * Saves what is drawn: a moment after the last finished gesture, one save at a time, always based on the revision
 * that was last known to stand. What has not reached the server lies in a draft on this machine. Apart from React.
 */
import type { ProblemDto, SceneDto, StaleRevisionDto } from "@heddle/backend/contract";
import type { Scene } from "@heddle/kernels/scene";

export type SaveOutcome =
  | { kind: "saved"; scene: SceneDto }
  | { kind: "stale"; stale: StaleRevisionDto }
  | { kind: "refused"; sentence: string; problems: readonly ProblemDto[] }
  | { kind: "offline"; sentence: string };

export type SaveState =
  | { kind: "saved"; at: string }
  | { kind: "unsaved" }
  | { kind: "saving" }
  | Exclude<SaveOutcome, { kind: "saved" }>;

/** What is kept on this machine until the server has it. */
export interface Draft {
  baseRevision: number;
  document: unknown;
  at: string;
}

export interface DraftStore {
  read(): Draft | null;
  write(draft: Draft): void;
  clear(): void;
}

export interface AutosaveOptions {
  scene: Pick<SceneDto, "revision" | "updatedAt">;
  document: Scene;
  /** Never rejects. */
  save: (document: Scene, baseRevision: number) => Promise<SaveOutcome>;
  drafts: DraftStore;
  /** Called after each save that stands. */
  onSaved?: (scene: SceneDto) => void;
  debounceMs?: number;
  retryMs?: number;
  now?: () => Date;
}

const same = (a: unknown, b: unknown): boolean => a === b || JSON.stringify(a) === JSON.stringify(b);

export class Autosave {
  readonly #options: Required<Pick<AutosaveOptions, "debounceMs" | "retryMs" | "now">> & AutosaveOptions;
  readonly #listeners = new Set<() => void>();
  #state: SaveState;
  #revision: number;
  /** What the server holds at `#revision`. */
  #standing: Scene;
  #waiting: Scene | null = null;
  #timer: ReturnType<typeof setTimeout> | null = null;
  #running: Promise<void> | null = null;

  constructor(options: AutosaveOptions) {
    this.#options = { debounceMs: 800, retryMs: 5_000, now: () => new Date(), ...options };
    this.#revision = options.scene.revision;
    this.#standing = options.document;
    this.#state = { kind: "saved", at: options.scene.updatedAt };
  }

  readonly getState = (): SaveState => this.#state;
  /** The revision that stands as far as this page knows. */
  get revision(): number {
    return this.#revision;
  }
  /** What is drawn and not saved; null where all is saved. */
  get waiting(): Scene | null {
    return this.#waiting;
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => {
      this.#listeners.delete(listener);
    };
  };

  /** A gesture is finished: the document as it now stands. */
  change(document: Scene): void {
    if (this.#waiting === null && this.#running === null && same(document, this.#standing)) return;
    this.#waiting = document;
    this.#options.drafts.write({
      baseRevision: this.#revision,
      document,
      at: this.#options.now().toISOString(),
    });
    // A conflict waits for the person; saving on would only meet it again.
    if (this.#state.kind === "stale") return;
    if (this.#running === null) this.#set({ kind: "unsaved" });
    this.#schedule(this.#options.debounceMs);
  }

  /**
   * Saves at once what is not saved.
   * @returns the revision that now holds the drawing; null where it could not be saved (the state says why)
   */
  async flush(): Promise<number | null> {
    this.#unschedule();
    while (this.#running !== null) await this.#running;
    if (this.#state.kind === "stale") return null;
    if (this.#waiting !== null) await this.#save();
    return this.#waiting === null ? this.#revision : null;
  }

  /** The draft was based on this revision; so is what is saved next. */
  rebase(revision: number): void {
    this.#revision = revision;
  }

  /** Settles a conflict: the other version stands, with this document; what waited is dropped. */
  adopt(theirs: SceneDto, document: Scene): void {
    this.#unschedule();
    this.#revision = theirs.revision;
    this.#standing = document;
    this.#waiting = null;
    this.#options.drafts.clear();
    this.#set({ kind: "saved", at: theirs.updatedAt });
  }

  /** The page closes: a last try, without waiting; the draft stays until a save stands. */
  close(): void {
    void this.flush();
  }

  #set(state: SaveState): void {
    this.#state = state;
    for (const listener of this.#listeners) listener();
  }
  #unschedule(): void {
    if (this.#timer !== null) clearTimeout(this.#timer);
    this.#timer = null;
  }
  #schedule(afterMs: number): void {
    this.#unschedule();
    this.#timer = setTimeout(() => {
      this.#timer = null;
      if (this.#running === null) void this.#save();
    }, afterMs);
  }

  #save(): Promise<void> {
    const document = this.#waiting;
    if (document === null) return Promise.resolve();
    this.#set({ kind: "saving" });
    this.#running = this.#options.save(document, this.#revision).then((outcome) => {
      this.#running = null;
      this.#settle(document, outcome);
    });
    return this.#running;
  }

  #settle(document: Scene, outcome: SaveOutcome): void {
    if (outcome.kind !== "saved") {
      this.#set(outcome);
      if (outcome.kind === "offline") this.#schedule(this.#options.retryMs);
      return;
    }
    this.#revision = outcome.scene.revision;
    this.#standing = document;
    this.#options.onSaved?.(outcome.scene);
    if (this.#waiting === document) {
      this.#waiting = null;
      this.#options.drafts.clear();
      this.#set({ kind: "saved", at: outcome.scene.updatedAt });
      return;
    }
    // Drawn on while the save was under way.
    this.#set({ kind: "unsaved" });
    this.#schedule(this.#options.debounceMs);
  }
}
