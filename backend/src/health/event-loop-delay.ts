/** How late the event loop is: the time that a due timer waits, which is what every request and frame waits, too. */
import { monitorEventLoopDelay } from "node:perf_hooks";
import { Injectable, type OnApplicationBootstrap, type OnApplicationShutdown } from "@nestjs/common";

const RESOLUTION_MS = 5;
const NS_PER_MS = 1e6;

export interface DelaysMs {
  p50: number;
  p99: number;
  max: number;
  /** Milliseconds that the figures are of. */
  overMs: number;
}

@Injectable()
export class EventLoopDelay implements OnApplicationBootstrap, OnApplicationShutdown {
  private readonly histogram = monitorEventLoopDelay({ resolution: RESOLUTION_MS });
  private sinceMs = performance.now();

  onApplicationBootstrap(): void {
    this.histogram.enable();
    this.sinceMs = performance.now();
  }

  onApplicationShutdown(): void {
    this.histogram.disable();
  }

  /** The delays since the last call. */
  take(): DelaysMs {
    // The histogram holds the whole interval between two looks; only what goes beyond it is delay.
    const late = (ns: number): number => Math.max(0, ns / NS_PER_MS - RESOLUTION_MS);
    const { histogram } = this;
    const nowMs = performance.now();
    const delays = {
      p50: late(histogram.percentile(50)),
      p99: late(histogram.percentile(99)),
      max: late(histogram.max),
      overMs: nowMs - this.sinceMs,
    };
    histogram.reset();
    this.sinceMs = nowMs;
    return delays;
  }
}
