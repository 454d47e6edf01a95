/**
 * The main job in a real browser, from sign-in to finding it all again: the slotted box leaks, an absorber painted over
 * its slot while it runs brings the leak down, the edited scene is run cleanly, and scene and trace are there after a
 * reload. What the page shows is checked against what the server measured at the probe outside the box.
 */
import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import type { RunDto, SceneDto, TraceEvent } from "@heddle/backend/contract";
import { openBrowser, openDesk, shoot } from "../support/browser.js";
import { type Client, type RunningServer, startServer } from "../support/server.js";
import { SheetPage } from "../support/sheet-page.js";
import { openViewer } from "../support/viewer.js";

const SLOTTED_BOX = "Power-supply box with a slot, driven by a tone";
const OUTSIDE_PROBE = "outside";

let server: RunningServer;
let browser: Browser;
let engineer: Client;

beforeAll(async () => {
  server = await startServer();
  browser = await openBrowser();
  engineer = await server.as("engineer");
});

afterAll(async () => {
  await browser.close();
  await server.stop();
});

const get = async <T>(path: string): Promise<T> => (await engineer.send<T>("GET", path)).body;

async function waitFor<T>(what: string, read: () => Promise<T | undefined>, withinMs = 240_000): Promise<T> {
  const end = Date.now() + withinMs;
  while (Date.now() < end) {
    const value = await read();
    if (value !== undefined) return value;
    await new Promise((resolve) => setTimeout(resolve, 250));
  }
  throw new Error(`Waited ${withinMs} ms in vain for ${what}.`);
}

const latestRun = async (sceneId: string): Promise<RunDto | undefined> =>
  (await get<RunDto[]>(`/api/scenes/${sceneId}/runs`))[0];

/** Largest magnitude at the probe outside the box over a stretch of field time. */
async function outsidePeak(runId: string, fromNs: number, toNs: number): Promise<number> {
  const viewer = await openViewer(server.url, { cookie: engineer.cookie });
  const joined = await viewer.join(runId);
  viewer.close();
  if (!joined.ok) throw new Error(joined.error.message);
  const trace = joined.traces.find(({ probe }) => probe === OUTSIDE_PROBE) as TraceEvent["traces"][number];
  let peak = 0;
  trace.values.forEach((value, index) => {
    const timeNs = trace.startNs + index * trace.stepNs;
    if (timeNs >= fromNs && timeNs < toNs) peak = Math.max(peak, Math.abs(value));
  });
  return peak;
}

describe("the main job", () => {
  let sceneId = "";
  let cleanRunId = "";

  test("an engineer watches the slot leak, paints over it while it runs, and runs it cleanly", async () => {
    const { page, context, faults } = await openDesk(browser, server.url);
    const sheet = new SheetPage(page);
    await page.goto("/");
    await shoot(page, "sign-in");
    await page.getByRole("button", { name: /engineer/i }).click();
    await page.getByRole("link", { name: "Relay pod enclosure" }).click();
    await page.getByRole("link", { name: SLOTTED_BOX }).first().click();
    await sheet.ready();
    sceneId = new URL(page.url()).pathname.split("/").at(-1) ?? "";
    await shoot(page, "sheet-ready");

    // Slow enough to paint against: 1 ns of field time a second.
    await page.getByRole("slider", { name: "Pace" }).focus();
    for (const key of ["Home", "PageUp", "PageUp", "PageUp", "PageUp"]) await page.keyboard.press(key);
    await page.getByText(/1(\.0)?\s*ns a second/).waitFor();
    await page.getByRole("button", { name: "Run", exact: true }).click();
    const run = await waitFor("10 ns of field", async () => {
      const latest = await latestRun(sceneId);
      return latest !== undefined && latest.timeNs > 10 ? latest : undefined;
    });
    expect(run.state).toBe("running");
    await shoot(page, "leaking");

    await sheet.tool("b");
    await page
      .getByText(/Magnetic sheet/)
      .first()
      .click();
    await page.getByLabel("Brush width").fill("20");
    await page.getByLabel("Brush width").press("Enter");
    const atStroke = await latestRun(sceneId);
    if (atStroke === undefined) throw new Error("The run is gone.");
    await sheet.drag([238, 126], [238, 146], [238, 166]);
    const edited = await waitFor("the live edit", async () => {
      const latest = await latestRun(sceneId);
      return latest?.edited === true ? latest : undefined;
    });
    const settled = await waitFor("the field to settle", async () => {
      const latest = await latestRun(sceneId);
      return latest !== undefined && latest.timeNs > edited.timeNs + 5 ? latest : undefined;
    });
    // The tone still builds up: what counts is the level just before the stroke.
    const leaking = await outsidePeak(run.id, atStroke.timeNs - 2, atStroke.timeNs);
    expect(leaking).toBeGreaterThan(0);
    const lined = await outsidePeak(run.id, settled.timeNs - 2, settled.timeNs);
    await shoot(page, "painted-over");
    expect(lined).toBeLessThan(0.75 * leaking);
    expect(await page.getByText(/for the eye/).count()).toBeGreaterThan(0);

    await page.getByRole("slider", { name: "Pace" }).focus();
    await page.keyboard.press("End");
    await page.getByRole("button", { name: "Run the edited scene cleanly" }).click();
    const clean = await waitFor("the clean run", async () => {
      const latest = await latestRun(sceneId);
      return latest !== undefined && latest.id !== run.id ? latest : undefined;
    });
    cleanRunId = clean.id;
    expect(clean.edited).toBe(false);
    expect(clean.revision).toBeGreaterThan(run.revision);
    await waitFor(
      "the clean run's end",
      async () => {
        const latest = await get<RunDto>(`/api/runs/${clean.id}`);
        return latest.state === "done" ? latest : undefined;
      },
      240_000,
    );

    await page.reload();
    await sheet.ready();
    await waitFor("the run's state on the page", async () =>
      /done|ended|time|decay/i.test(await sheet.runState()) ? true : undefined,
    );
    await page.waitForTimeout(1_500);
    await shoot(page, "found-again");
    expect(await page.getByText("Magnetic sheet").count()).toBeGreaterThan(0);
    const scene = await get<SceneDto>(`/api/scenes/${sceneId}`);
    const paint = scene.document.paint as { kind: string }[];
    expect(paint.at(-1)?.kind).toBe("stroke");
    expect(faults).toEqual([]);
    await context.close();
  }, 480_000);

  test("a manager watches it and is refused the edit, by the page and by the server", async () => {
    const { page, context, faults } = await openDesk(browser, server.url, { scheme: "dark" });
    await page.goto("/");
    await page.getByRole("button", { name: /manager/i }).click();
    await page.getByRole("link", { name: "Relay pod enclosure" }).waitFor();
    await page.goto(`/scenes/${sceneId}`);
    await new SheetPage(page).ready();
    await page.waitForTimeout(1_500);
    await shoot(page, "manager-night");
    expect(await page.getByRole("button", { name: "Run", exact: true }).count()).toBe(0);
    const manager = await server.as("manager");
    const scene = await get<SceneDto>(`/api/scenes/${sceneId}`);
    const save = { baseRevision: scene.revision, document: scene.document };
    const refused = await manager.send<{ code: string }>("PUT", `/api/scenes/${sceneId}`, save);
    expect([refused.status, refused.body.code]).toEqual([403, "not-allowed"]);
    const run = await manager.send("POST", `/api/scenes/${sceneId}/runs`, { revision: scene.revision });
    expect(run.status).toBe(403);
    expect((await manager.send("GET", `/api/runs/${cleanRunId}/result`)).status).toBe(200);
    expect(faults).toEqual([]);
    await context.close();
  });

  test("a guest sees nothing", async () => {
    const { page, context } = await openDesk(browser, server.url);
    await page.goto(`/scenes/${sceneId}`);
    await page.getByRole("button", { name: /engineer/i }).waitFor();
    expect(await page.locator(".sheet-paper").count()).toBe(0);
    expect((await page.request.get(`/api/scenes/${sceneId}`)).status()).toBe(401);
    expect((await page.request.get(`/api/runs/${cleanRunId}/result`)).status()).toBe(401);
    await shoot(page, "guest");
    await context.close();
  });
});
