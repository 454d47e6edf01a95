/** The sheet as a hand finds it: points are given in millimetres of the section. */
import type { Page } from "playwright-core";

type PointMm = readonly [xMm: number, yMm: number];

export class SheetPage {
  constructor(readonly page: Page) {}

  get paper() {
    return this.page.locator(".sheet-paper");
  }

  /** Waits until the drawing stands. */
  async ready(): Promise<void> {
    await this.paper.waitFor();
    await this.page.locator("[data-testid=save-note]").waitFor();
  }

  /** Pixel of a point of the section on the page. */
  async at([xMm, yMm]: PointMm): Promise<{ x: number; y: number }> {
    const bounds = await this.paper.boundingBox();
    const view = await this.paper.getAttribute("data-view");
    if (bounds === null || view === null) throw new Error("The sheet is not on the page.");
    const [pxPerMm, originX, originY] = view.split(" ").map(Number);
    return { x: bounds.x + originX + xMm * pxPerMm, y: bounds.y + originY - yMm * pxPerMm };
  }

  /** Presses a tool's letter with the sheet in focus. */
  async tool(letter: string): Promise<void> {
    await this.paper.focus();
    await this.page.keyboard.press(letter);
  }

  /** One gesture through the points, slowly enough to be drawn. */
  async drag(...points: PointMm[]): Promise<void> {
    const [first, ...rest] = points;
    const start = await this.at(first);
    await this.page.mouse.move(start.x, start.y);
    await this.page.mouse.down();
    for (const point of rest) {
      const to = await this.at(point);
      await this.page.mouse.move(to.x, to.y, { steps: 8 });
    }
    await this.page.mouse.up();
  }

  async click(point: PointMm): Promise<void> {
    const to = await this.at(point);
    await this.page.mouse.click(to.x, to.y);
  }

  runState(): Promise<string> {
    return this.page.getByTestId("run-state").innerText();
  }

  saveNote(): Promise<string> {
    return this.page.getByTestId("save-note").innerText();
  }
}
