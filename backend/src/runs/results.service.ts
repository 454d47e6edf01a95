/** The result document as it is sent: its text as it was kept, long arrays put back in their places. */
import { Inject, Injectable } from "@nestjs/common";
import type { TraceEvent } from "../contract/socket.js";
import { resultSchema } from "@heddle/kernels/scene";
import { ARRAY_STORE, type ArrayStore } from "../storage/array-store.js";
import { RunsRepository } from "./runs.repository.js";
import { MAX_TRACE_VALUES, toChunks } from "./worker/trace-chunks.js";

/** As `packResult` writes it. No text of a person can look so: JSON would escape its quotes. */
const REFERENCE = /\{"array":"([0-9a-f]{64})","length":\d+\}/g;
/** Numbers turned into text between two looks at the event loop. */
const VALUES_PER_PIECE = 20_000;
const BYTES_PER_VALUE = 8;

@Injectable()
export class ResultsService {
  constructor(
    private readonly repository: RunsRepository,
    @Inject(ARRAY_STORE) private readonly arrays: ArrayStore,
  ) {}

  /** The document's JSON text piece by piece; null where the run has no result. */
  async document(runId: string): Promise<AsyncGenerator<string> | null> {
    const text = await this.repository.resultText(runId);
    return text === null ? null : this.pieces(text);
  }

  /** The kept traces as a viewer gets them; empty where the run has no result. */
  async traces(runId: string): Promise<TraceEvent["traces"]> {
    const pieces = await this.document(runId);
    if (pieces === null) return [];
    let text = "";
    for await (const piece of pieces) text += piece;
    const { probes } = resultSchema.parse(JSON.parse(text));
    const first = probes.filter(({ id }, index) => probes.findIndex((probe) => probe.id === id) === index);
    return toChunks(
      first.map(({ id, unit, trace }) => ({
        probe: id,
        unit,
        startNs: trace.startNs,
        stepNs: trace.stepNs,
        from: 0,
        values: Float64Array.from(trace.values),
      })),
      MAX_TRACE_VALUES,
    );
  }

  private async *pieces(text: string): AsyncGenerator<string> {
    let at = 0;
    for (const reference of text.matchAll(REFERENCE)) {
      const sha256 = reference.at(1) ?? "";
      yield text.slice(at, reference.index);
      yield* this.values(sha256);
      at = reference.index + reference[0].length;
    }
    yield text.slice(at);
  }

  private async *values(sha256: string): AsyncGenerator<string> {
    const bytes = await this.arrays.get(sha256);
    if (bytes === null) throw new Error(`The array ${sha256} of a result is missing from the data folder.`);
    const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
    const count = Math.floor(bytes.byteLength / BYTES_PER_VALUE);
    yield "[";
    for (let from = 0; from < count; from += VALUES_PER_PIECE) {
      const values = Array.from({ length: Math.min(VALUES_PER_PIECE, count - from) }, (_, index) =>
        view.getFloat64((from + index) * BYTES_PER_VALUE, true),
      );
      yield `${from === 0 ? "" : ","}${values.join(",")}`;
    }
    yield "]";
  }
}
