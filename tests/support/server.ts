/** The built server as a process of its own, on a data folder that is gone afterwards. */
import { spawn, type ChildProcess } from "node:child_process";
import { existsSync } from "node:fs";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { MemberRole, RunDto, SceneDto } from "@heddle/backend/contract";

const MAIN = fileURLToPath(new URL("../../backend/dist/main.js", import.meta.url));
const READY = /^Heddle is ready at (\S+)$/m;
const READY_WITHIN_MS = 90_000;
const ENDS_WITHIN_MS = 20_000;

export interface ServerOptions {
  /** Left out: a new folder, removed by `stop`. */
  dataDir?: string;
  /** Settings on top of a port of the system's choice on the loopback address. */
  environment?: Record<string, string>;
}

export interface RunningServer {
  /** Origin of the pages and of the API, without a trailing slash. */
  url: string;
  dataDir: string;
  pid: number;
  /** What the process has written to its standard error so far. */
  errors: () => string;
  /** A client signed in as the demo's person of that role. */
  as: (role: MemberRole) => Promise<Client>;
  /** Asks the process to end and waits for it; gives its exit status, null where it had to be killed. */
  end: () => Promise<number | null>;
  /** The same, and removes the folder if it is the server's own. */
  stop: () => Promise<void>;
  /** Ends the process as a power cut would, and leaves the folder. */
  kill: () => Promise<void>;
}

export interface Client {
  cookie: string;
  /** Sends JSON and gives status and parsed body; the caller says what it expects. */
  // eslint-disable-next-line @typescript-eslint/no-unnecessary-type-parameters -- the body's type is the caller's claim
  send: <T = unknown>(method: string, path: string, body?: unknown) => Promise<{ status: number; body: T }>;
  /** Makes a project with the document as its scene. */
  scene: (document: object) => Promise<SceneDto>;
  run: (sceneId: string, body?: { revision?: number; paused?: boolean }) => Promise<RunDto>;
}

/**
 * Starts the server that `npm run build` made.
 * @throws where it was not built, or does not say within a while that it is ready
 */
export async function startServer(options: ServerOptions = {}): Promise<RunningServer> {
  if (!existsSync(MAIN)) throw new Error("The server is not built: run npm run build first.");
  const dataDir = options.dataDir ?? (await mkdtemp(join(tmpdir(), "heddle-server-")));
  const process_ = spawn(process.execPath, [MAIN], {
    env: {
      ...withoutOurs(process.env),
      HOST: "127.0.0.1",
      PORT: "0",
      DATA_DIR: dataDir,
      ...options.environment,
    },
    stdio: ["ignore", "pipe", "pipe"],
  });
  let errors = "";
  process_.stderr.setEncoding("utf8").on("data", (text: string) => {
    errors += text;
  });
  const url = await ready(process_, () => errors);
  const ended = new Promise<void>((resolve) => process_.once("exit", () => resolve()));
  const end = async (signal: NodeJS.Signals): Promise<number | null> => {
    if (process_.exitCode === null && process_.signalCode === null) process_.kill(signal);
    const timer = setTimeout(() => process_.kill("SIGKILL"), ENDS_WITHIN_MS);
    await ended;
    clearTimeout(timer);
    return process_.exitCode;
  };
  return {
    url,
    dataDir,
    pid: process_.pid ?? 0,
    errors: () => errors,
    as: (role) => signIn(url, role),
    stop: async () => {
      await end("SIGTERM");
      if (options.dataDir === undefined) await rm(dataDir, { recursive: true, force: true });
    },
    end: () => end("SIGTERM"),
    kill: async () => {
      await end("SIGKILL");
    },
  };
}

/** A setting of whoever runs the tests must not decide where the tests write. */
function withoutOurs(environment: NodeJS.ProcessEnv): NodeJS.ProcessEnv {
  const rest = { ...environment };
  for (const name of ["APP_URL", "DATABASE_URL", "DEMO", "NODE_OPTIONS"]) Reflect.deleteProperty(rest, name);
  return rest;
}

function ready(child: ChildProcess, errors: () => string): Promise<string> {
  return new Promise((resolve, reject) => {
    let said = "";
    const timer = setTimeout(() => {
      child.kill("SIGKILL");
      reject(new Error(`The server did not become ready. It wrote: ${said}${errors()}`));
    }, READY_WITHIN_MS);
    child.stdout?.setEncoding("utf8").on("data", (text: string) => {
      said += text;
      const url = READY.exec(said)?.at(1);
      if (url === undefined) return;
      clearTimeout(timer);
      resolve(url);
    });
    child.once("exit", (status) => {
      clearTimeout(timer);
      reject(new Error(`The server ended with status ${String(status)}. It wrote: ${said}${errors()}`));
    });
  });
}

async function signIn(url: string, role: MemberRole): Promise<Client> {
  const answer = await fetch(`${url}/api/demo-sign-in`, {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify({ role }),
  });
  if (!answer.ok)
    throw new Error(`Signing in as ${role} was answered ${answer.status}: ${await answer.text()}`);
  const cookie = answer.headers
    .getSetCookie()
    .map((one) => one.split(";")[0])
    .join("; ");

  // eslint-disable-next-line @typescript-eslint/no-unnecessary-type-parameters -- see Client
  const send: Client["send"] = async <T>(method: string, path: string, body?: unknown) => {
    const response = await fetch(`${url}${path}`, {
      method,
      headers: { cookie, "content-type": "application/json" },
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
    });
    const text = await response.text();
    return { status: response.status, body: (text === "" ? null : JSON.parse(text)) as T };
  };
  const made = async <T>(path: string, body: unknown): Promise<T> => {
    const response = await send<T>("POST", path, body);
    if (response.status !== 201) {
      throw new Error(`${path} was answered ${response.status}: ${JSON.stringify(response.body)}`);
    }
    return response.body;
  };
  return {
    cookie,
    send,
    scene: async (document) => {
      const project = await made<{ id: string }>("/api/projects", { name: "Tests" });
      return made<SceneDto>(`/api/projects/${project.id}/scenes`, { document });
    },
    run: (sceneId, body = {}) => made<RunDto>(`/api/scenes/${sceneId}/runs`, { revision: 1, ...body }),
  };
}
