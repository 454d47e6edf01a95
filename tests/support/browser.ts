/** Debian's Chromium, driven for journeys: a fresh profile each, software rendering, no traffic of its own. */
import { mkdirSync } from "node:fs";
import { join } from "node:path";
import { type Browser, type BrowserContext, chromium, type Page } from "playwright-core";

const shotsFolder = join(import.meta.dirname, "../e2e/shots");

export async function openBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env.CHROMIUM ?? "/usr/bin/chromium",
    args: [
      "--no-sandbox",
      "--use-angle=swiftshader",
      "--enable-unsafe-swiftshader",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
      "--disable-quic",
      "--no-first-run",
    ],
  });
}

export interface DeskOptions {
  scheme?: "light" | "dark";
  width?: number;
  height?: number;
}

/** One person's browser: a context with its own cookies, and a page whose script errors fail the journey. */
export async function openDesk(
  browser: Browser,
  address: string,
  { scheme = "light", width = 1440, height = 900 }: DeskOptions = {},
): Promise<{ page: Page; context: BrowserContext; faults: string[] }> {
  const context = await browser.newContext({
    baseURL: address,
    colorScheme: scheme,
    viewport: { width, height },
    reducedMotion: "reduce",
  });
  const page = await context.newPage();
  const faults: string[] = [];
  page.on("pageerror", (error) => faults.push(error.message));
  return { page, context, faults };
}

export async function shoot(page: Page, name: string): Promise<void> {
  mkdirSync(shotsFolder, { recursive: true });
  await page.screenshot({ path: join(shotsFolder, `${name}.png`) });
}
