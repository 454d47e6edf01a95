import { figure, lengthInWords } from "../../camera/lengths-in-words";
import { distance, type Xy } from "../../geometry/points";
import { type SheetPointer, type ToolMachine, type ToolPicture, ToolState } from "../tool";
import type { Measured } from "./idle";

/** A measure's parts in words: "12.5 mm" and "across 10, up 7.5, 36.9°". */
export function measureParts({ from, to }: Measured): { length: string; parts: string } {
  const [dx, dy] = [to[0] - from[0], to[1] - from[1]];
  const angle = (Math.atan2(dy, dx) * 180) / Math.PI;
  return {
    length: lengthInWords(distance(from, to)),
    parts: `across ${figure(dx)}, up ${figure(dy)}, ${figure(angle, 1)}°`,
  };
}

/** From where it was pressed to the pointer. Shift keeps to the nearer axis. */
export class Measuring extends ToolState {
  override cursor = "crosshair";
  readonly #from: Xy;
  readonly #rest: (measured: Measured | null) => ToolState;
  #to: Xy;

  constructor(machine: ToolMachine, from: Xy, rest: (measured: Measured | null) => ToolState) {
    super(machine);
    this.#from = from;
    this.#to = from;
    this.#rest = rest;
  }

  override pointerMove(pointer: SheetPointer): void {
    const [x, y] = pointer.snapped;
    const across = Math.abs(x - this.#from[0]) >= Math.abs(y - this.#from[1]);
    this.#to = pointer.shift ? (across ? [x, this.#from[1]] : [this.#from[0], y]) : [x, y];
    this.store.touchToolPicture();
  }

  override pointerUp(): void {
    const measured = { from: this.#from, to: this.#to };
    if (distance(this.#from, this.#to) === 0) {
      this.machine.go(this.#rest(null));
      return;
    }
    this.machine.go(this.#rest(measured));
    const { length, parts } = measureParts(measured);
    this.store.say(`${length}, ${parts}`);
  }

  override cancel(): void {
    this.machine.go(this.#rest(null));
  }

  override picture(): ToolPicture {
    return { measure: { from: this.#from, to: this.#to } };
  }
}
