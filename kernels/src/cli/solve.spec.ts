import {
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  symlinkSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Writable } from "node:stream";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { resultSchema, SceneError, type SceneInput } from "../scene/index.js";
import { openSession, type SolveSession } from "../solving/index.js";
import { EXIT, type ExitStatus, solve, type SolveIo } from "./solve.js";

class Collected extends Writable {
  text = "";
  isTTY = false;
  override _write(chunk: Buffer, _encoding: string, done: () => void): void {
    this.text += chunk.toString("utf8");
    done();
  }
}

/** A small box of air, closed, driven for a moment. */
const scene = (changes: Partial<SceneInput> = {}): SceneInput => ({
  format: "heddle-scene",
  version: 1,
  name: "Small",
  polarization: "TMz",
  section: { widthMm: 30, heightMm: 20 },
  band: { fromGHz: 4, toGHz: 12 },
  mesh: { cellMm: 1 },
  edges: { left: "absorbing", right: "absorbing", bottom: "electric", top: "electric" },
  sources: [{ kind: "line", id: "wire", x: 8, y: 9 }],
  probes: [{ kind: "point", id: "p", x: 20, y: 9, field: "Ez" }],
  stop: { maxTimeNs: 0.5 },
  ...changes,
});

let folder = "";
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "heddle-solve-"));
});
afterEach(() => {
  rmSync(folder, { recursive: true, force: true });
});

const write = (name: string, document: unknown): string => {
  const path = join(folder, name);
  writeFileSync(path, typeof document === "string" ? document : JSON.stringify(document));
  return path;
};

interface Ran {
  status: ExitStatus;
  stdout: string;
  stderr: string;
}
const run = async (args: readonly string[], changes: Partial<SolveIo> = {}, tty = false): Promise<Ran> => {
  const stdout = new Collected();
  const stderr = new Collected();
  stderr.isTTY = tty;
  const io: SolveIo = { stdout, stderr, interrupt: new AbortController().signal, openSession, ...changes };
  return { status: await solve(args, io), stdout: stdout.text, stderr: stderr.text };
};
const linesOf = (text: string): string[] => text.split("\n").filter((line) => line !== "");

describe("solve", () => {
  it("prints the result document, and nothing else, where no file is named", async () => {
    const ran = await run([write("s.json", scene())]);
    expect(ran).toMatchObject({ status: EXIT.done, stderr: "" });
    const result = resultSchema.parse(JSON.parse(ran.stdout));
    expect(result).toMatchObject({
      scene: { name: "Small" },
      grid: { nx: 30, ny: 20 },
      solver: { engine: "wasm", precision: "f32" },
    });
    expect(result.probes[0].trace.values.some((value) => value !== 0)).toBe(true);
  });

  it("writes the same document to a file and leaves no other behind", async () => {
    const path = write("s.json", scene());
    const out = join(folder, "r.json");
    const ran = await run([path, "--out", out]);
    expect(ran).toEqual({ status: EXIT.done, stdout: "", stderr: "" });
    expect(readdirSync(folder).sort()).toEqual(["r.json", "s.json"]);
    const written = resultSchema.parse(JSON.parse(readFileSync(out, "utf8")));
    const printed = resultSchema.parse(JSON.parse((await run([path])).stdout));
    expect({ ...written, timing: null }).toEqual({ ...printed, timing: null });
  });

  it.each([
    [["--engine", "reference"], "reference", "f64"],
    [["--engine", "reference", "--precision", "f32"], "reference", "f32"],
    [["--precision", "f64"], "reference", "f64"],
    [["--engine", "wasm", "--threads", "2"], "wasm", "f32"],
  ])("computes by the engine of %j", async (args, engine, precision) => {
    const ran = await run([write("s.json", scene()), ...args]);
    expect(resultSchema.parse(JSON.parse(ran.stdout)).solver).toMatchObject({ engine, precision });
  });

  it("takes frequencies in the order given, and a precision", async () => {
    const ran = await run([write("s.json", scene()), "--frequencies", "9,5.5,7", "--precision", "f32"]);
    const result = resultSchema.parse(JSON.parse(ran.stdout));
    expect(result.probes[0].spectrum?.GHz).toEqual([9, 5.5, 7]);
    expect(result.solver.precision).toBe("f32");
  });

  it("draws a bar on a terminal and wipes it at the end", async () => {
    const ran = await run([write("s.json", scene({ stop: { maxTimeNs: 20, decayDb: 300 } }))], {}, true);
    expect(ran.status).toBe(EXIT.done);
    expect(ran.stderr).toMatch(/step \d+ of at most \d+ {2}\d+ % {2}[\d.]+ M cell-steps\/s {2}.* left/);
    expect(ran.stderr.endsWith("\r\u001b[K")).toBe(true);
  });
});

describe("solve refuses with status 2", () => {
  it("a scene, one line a problem", async () => {
    const ran = await run([write("s.json", { ...scene({ background: "sand" }), colour: 1 })]);
    expect(ran).toMatchObject({ status: EXIT.refused, stdout: "" });
    expect(linesOf(ran.stderr)).toEqual([
      'colour: The key "colour" is not known here; remove it or check its spelling.',
      'background: There is no medium "sand"; add it to "media" or choose one that is there.',
    ]);
  });

  it("a scene that nothing drives, and one that needs what is not computed", async () => {
    expect((await run([write("s.json", scene({ sources: [] }))])).stderr).toBe(
      "sources: Nothing drives this scene; place a source.\n",
    );
  });

  it("a text that is no JSON, in one line though the reason has several", async () => {
    const ran = await run([write("s.json", '{\n  "format": ,\n}')]);
    expect(ran.status).toBe(EXIT.refused);
    expect(linesOf(ran.stderr)).toHaveLength(1);
    expect(ran.stderr).toMatch(/^scene: The document is not JSON/);
  });

  it("a file that is not there and one that is a folder", async () => {
    const missing = join(folder, "none.json");
    expect(await run([missing])).toEqual({
      status: EXIT.refused,
      stdout: "",
      stderr: `${missing}: There is no such file; name a scene document.\n`,
    });
    expect((await run([folder])).stderr).toContain("It is a folder");
  });

  it.each([
    [["--shielding"], "paint: No patch of the scene is marked"],
    [["--engine", "wasm", "--precision", "f64"], "--precision: The wasm engine computes in f32"],
    [["--engine", "steam"], '--engine: There is no engine "steam"'],
    [["--precision", "f16"], '--precision: "f16" is no precision'],
    [["--threads", "0"], '--threads: "0" is no number of threads'],
    [["--frequencies", "1,-2"], "--frequencies: Entry 2 is no frequency"],
    [["--frequencies", "1,,2"], "--frequencies: Entry 2 is no frequency"],
    [["--fast"], "options: Unknown option '--fast'"],
    [["other.json"], 'options: One scene at a time; "other.json"'],
  ])("%j by name", async (args, expected) => {
    const ran = await run([write("s.json", scene()), ...args]);
    expect(ran).toMatchObject({ status: EXIT.refused, stdout: "" });
    expect(ran.stderr.startsWith(expected), ran.stderr).toBe(true);
  });

  it("no scene at all, and every wrong option at once", async () => {
    expect((await run([])).stderr).toContain("Name the scene to solve.");
    expect(linesOf((await run(["--engine", "steam", "--threads", "x"])).stderr)).toHaveLength(3);
  });

  it("what the session refuses", async () => {
    const problems = [{ path: "paint[0]", sentence: "It cannot be meshed." }];
    const ran = await run([write("s.json", scene())], {
      openSession: () => Promise.reject(new SceneError(problems)),
    });
    expect(ran).toEqual({ status: EXIT.refused, stdout: "", stderr: "paint[0]: It cannot be meshed.\n" });
  });
});

/** A session that behaves like the real one but for the parts replaced. */
const replaced =
  (parts: Partial<SolveSession>): SolveIo["openSession"] =>
  async (given, options) => {
    const session = await openSession(given, options);
    return new Proxy(session, {
      get: (target, key): unknown => {
        const value: unknown = Object.hasOwn(parts, key) ? Reflect.get(parts, key) : Reflect.get(target, key);
        return typeof value === "function" ? value.bind(target) : value;
      },
    });
  };

describe("solve fails with status 3", () => {
  it("with the session's sentence, and leaves an older result as it was", async () => {
    const out = write("r.json", "older");
    const failure = { code: "non-finite" as const, sentence: "The field grew past every bound in foam." };
    const failing = replaced({ advance: () => ({ kind: "failed", failure }) });
    const ran = await run([write("s.json", scene()), "--out", out], { openSession: failing });
    expect(ran).toEqual({
      status: EXIT.failed,
      stdout: "",
      stderr: "The field grew past every bound in foam.\n",
    });
    expect(readFileSync(out, "utf8")).toBe("older");
    expect(readdirSync(folder).sort()).toEqual(["r.json", "s.json"]);
  });

  it("with one line where something breaks unexpectedly", async () => {
    const breaking = replaced({
      advance: () => {
        throw new Error("no memory\n  is left");
      },
    });
    const ran = await run([write("s.json", scene())], { openSession: breaking });
    expect(ran).toEqual({ status: EXIT.failed, stdout: "", stderr: "The run failed: no memory is left.\n" });
  });

  it("before the run where the result has no place to go", async () => {
    const never: SolveIo["openSession"] = () => Promise.reject(new Error("opened"));
    const missing = await run([write("s.json", scene()), "--out", join(folder, "no", "r.json")], {
      openSession: never,
    });
    expect(missing).toMatchObject({ status: EXIT.failed, stdout: "" });
    expect(missing.stderr).toContain("the folder does not exist");
    expect((await run([write("s.json", scene()), "--out", folder], { openSession: never })).stderr).toContain(
      "it is a folder",
    );
  });

  it.skipIf(process.platform !== "linux")("on a full disk, and does not replace the device", async () => {
    const ran = await run([write("s.json", scene()), "--out", "/dev/full"]);
    expect(ran.status).toBe(EXIT.failed);
    expect(ran.stderr).toBe("The result could not be written to /dev/full: the disk is full.\n");
    expect(statSync("/dev/full").isCharacterDevice()).toBe(true);
  });

  it("where standard output is closed", async () => {
    const closed = new Writable({
      write: (_chunk, _encoding, done) => {
        done(Object.assign(new Error("write EPIPE"), { code: "EPIPE" }));
      },
    });
    const ran = await run([write("s.json", scene())], { stdout: closed });
    expect(ran).toMatchObject({
      status: EXIT.failed,
      stderr: "The result could not be written to standard output: the reader closed it.\n",
    });
  });
});

describe("an interrupted solve", () => {
  it("ends with status 130 and leaves nothing at the place of the result", async () => {
    const interrupt = new AbortController();
    const out = join(folder, "r.json");
    let turns = 0;
    const endless = replaced({
      advance: () => {
        turns += 1;
        if (turns === 3) interrupt.abort();
        return { kind: "running" };
      },
    });
    const ran = await run([write("s.json", scene()), "--out", out], {
      openSession: endless,
      interrupt: interrupt.signal,
    });
    expect(ran).toEqual({ status: EXIT.interrupted, stdout: "", stderr: "" });
    expect(turns).toBe(3);
    expect(readdirSync(folder)).toEqual(["s.json"]);
  });
});

describe("the file of a result", () => {
  it("is written through a link, which stays a link", async () => {
    const real = write("real.json", "older");
    const link = join(folder, "link.json");
    symlinkSync(real, link);
    expect((await run([write("s.json", scene()), "--out", link])).status).toBe(EXIT.done);
    expect(readFileSync(real, "utf8")).toContain("heddle-result");
    expect(readdirSync(folder).sort()).toEqual(["link.json", "real.json", "s.json"]);
  });
});
