/** Writes down how a run ended: its long arrays first, then result and state in one transaction; never the half. */
import { setTimeout as sleep } from "node:timers/promises";
import { Inject, Injectable, Logger, type BeforeApplicationShutdown } from "@nestjs/common";
import { isDiskFull } from "../../common/failures.js";
import type { RunState } from "../../contract/runs.js";
import { ARRAY_STORE, type ArrayStore } from "../../storage/array-store.js";
import { RunsRepository, type RunRecord } from "../runs.repository.js";
import type { PackedResult } from "../worker/protocol.js";
import type { LiveRun } from "./live-run.js";

export interface Ending {
  state: RunState;
  message?: string;
  stopReason?: RunRecord["stopReason"];
}

const RETRY_MS = 5_000;
const logger = new Logger("Runs");

@Injectable()
export class RunEndings implements BeforeApplicationShutdown {
  private readonly closing = new AbortController();

  constructor(
    private readonly repository: RunsRepository,
    @Inject(ARRAY_STORE) private readonly arrays: ArrayStore,
  ) {}

  beforeApplicationShutdown(): void {
    this.closing.abort();
  }

  /** Resolves once the ending stands in the database; where the result could not be kept, the run has failed. */
  end(live: LiveRun, ending: Ending, result: PackedResult | null): Promise<void> {
    const { record } = live;
    return live.inOrder(async () => {
      const kept = await this.keep(record, ending, result);
      Object.assign(record, kept, { endedAt: record.endedAt ?? new Date() });
    });
  }

  private async keep(record: RunRecord, ending: Ending, result: PackedResult | null): Promise<Ending> {
    try {
      for (const { sha256, bytes } of result?.arrays ?? []) await this.arrays.put(sha256, bytes);
      await this.write(record, ending, result?.text ?? null);
      return ending;
    } catch (error) {
      logger.error(`The end of run ${record.id} could not be written down.`, error);
      const failure: Ending =
        result === null
          ? ending
          : {
              state: "failed",
              message: isDiskFull(error)
                ? "The server's disk is full, so this run's result could not be kept: free some space and run the scene again."
                : "This run's result could not be kept, because the database did not take it: run the scene again.",
            };
      await this.writeUntilTaken(record, failure);
      return failure;
    }
  }

  private async writeUntilTaken(record: RunRecord, ending: Ending): Promise<void> {
    for (;;) {
      try {
        await this.write(record, ending, null);
        return;
      } catch (error) {
        // A stopping server leaves the run to its next start, which marks it as interrupted.
        if (this.closing.signal.aborted) throw error;
        await sleep(RETRY_MS, undefined, { ref: false });
      }
    }
  }

  private async write(record: RunRecord, ending: Ending, resultText: string | null): Promise<void> {
    const { step, timeNs, decayDb, cellStepsPerSecond } = record;
    await this.repository.end(
      record.id,
      { step, timeNs, decayDb, cellStepsPerSecond, ...ending },
      resultText,
    );
  }
}
