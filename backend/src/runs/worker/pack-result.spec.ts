import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import type { SolveResult } from "@heddle/kernels/scene";
import { FakeSession } from "../testing/fake-session.js";
import { packResult } from "./pack-result.js";

function resultWith(lengths: number[]): SolveResult {
  const session = new FakeSession();
  session.advance(10);
  const result = session.result();
  const probe = result.probes.at(0);
  if (probe === undefined) throw new Error("The fake session has a probe.");
  const probes = lengths.map((length, index) => ({
    ...probe,
    id: `p${index}`,
    trace: { ...probe.trace, values: Array.from({ length }, (_, at) => Math.sin(at) * 1e-7) },
  }));
  return { ...result, probes };
}

describe("packResult", () => {
  it("keeps a small result as it is", () => {
    const result = resultWith([100, 50]);
    const packed = packResult(result);
    expect(packed.arrays).toEqual([]);
    expect(JSON.parse(packed.text)).toEqual(result);
  });

  it("takes out the longest traces until the rest is small enough", () => {
    const packed = packResult(resultWith([300, 1_000, 200]), 8 * 500);
    expect(packed.arrays).toHaveLength(1);
    const taken = packed.arrays.at(0);
    expect(taken?.sha256).toBe(
      createHash("sha256")
        .update(taken?.bytes ?? "")
        .digest("hex"),
    );
    expect(packed.text).toContain(`"values":{"array":"${taken?.sha256 ?? ""}","length":1000}`);
    const view = new DataView(taken?.bytes.buffer ?? new ArrayBuffer(0));
    expect(view.byteLength).toBe(8_000);
    expect(view.getFloat64(8 * 77, true)).toBe(Math.sin(77) * 1e-7);
  });
});
