import { evaluateExpression, MAXIMA, type Length, type Scene } from "@heddle/kernels/scene";
import { roundMm } from "../geometry/points";

/** mm by parameter name. */
export type ParameterValues = ReadonlyMap<string, number>;

/** mm of a length as written, or a sentence that says why it has none. */
export type LengthReading = { ok: true; value: number } | { ok: false; sentence: string };

export function readLength(length: Length, values: ParameterValues): LengthReading {
  const reading: LengthReading =
    typeof length === "number" ? { ok: true, value: length } : evaluateExpression(length, values);
  if (reading.ok && Math.abs(reading.value) > MAXIMA.lengthMm)
    return { ok: false, sentence: `Lengths go up to ${String(MAXIMA.lengthMm)} mm.` };
  return reading;
}

/** The parameters that have a value; one that has none is left out, so that only what uses it cannot be drawn. */
export function readParameters(parameters: Scene["parameters"]): ParameterValues {
  const values = new Map<string, number>();
  for (const { name, value } of parameters) {
    const reading = readLength(value, values);
    if (reading.ok && !values.has(name)) values.set(name, reading.value);
  }
  return values;
}

const PLAIN_NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const WITH_UNIT = /^([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)\s*(mm|cm|m|in|um|µm|μm|mil)$/i;
const MM_PER_UNIT: ReadonlyMap<string, number> = new Map([
  ["mm", 1],
  ["cm", 10],
  ["m", 1000],
  ["in", 25.4],
  ["um", 1e-3],
  ["µm", 1e-3],
  ["μm", 1e-3],
  ["mil", 0.0254],
]);

export type TypedLength = { ok: true; length: Length; value: number } | { ok: false; sentence: string };

/**
 * What a person typed for a length: a number, a number with a unit ("0.5in"), or an expression over the
 * parameters, which is kept as written. A decimal comma is read as a point where no function call has it.
 */
export function parseTypedLength(text: string, values: ParameterValues): TypedLength {
  const typed = text.trim().replaceAll("−", "-");
  if (typed === "") return { ok: false, sentence: "Give a length in mm or an expression." };
  const plain = /^[+-]?\d+,\d+$/.test(typed) ? typed.replace(",", ".") : typed;
  const unit = WITH_UNIT.exec(plain);
  const number = unit === null ? null : Number(unit[1]) * (MM_PER_UNIT.get(unit[2].toLowerCase()) ?? 1);
  const length: Length = number !== null ? roundMm(number) : PLAIN_NUMBER.test(plain) ? Number(plain) : plain;
  const reading = readLength(length, values);
  return reading.ok ? { ok: true, length, value: reading.value } : reading;
}

/** A trailing "+ 3" or "- 0.5" of an expression; not the exponent of a number and not behind an operator. */
const TRAILING_CONSTANT = /^(.*[^\s+\-*/(,])\s*([+-])\s*(\d+(?:\.\d+)?)$/s;
const EXPONENT = /(^|[^a-zA-Z0-9.])(\d+\.?\d*|\.\d+)e$/i;

/** The length moved by `deltaMm`: numbers are added up, an expression keeps its words and gains a constant. */
export function shiftLength(length: Length, deltaMm: number): Length {
  if (typeof length === "number") return roundMm(length + deltaMm);
  if (deltaMm === 0) return length;
  const match = TRAILING_CONSTANT.exec(length);
  const head = match?.[1];
  const trailing = match !== null && head !== undefined && !EXPONENT.test(head);
  const base = trailing ? head : length;
  const constant = trailing ? Number(`${match[2]}${match[3]}`) : 0;
  const total = roundMm(constant + deltaMm);
  if (total === 0) return base;
  const shifted = `${base} ${total > 0 ? "+" : "-"} ${String(Math.abs(total))}`;
  return shifted.length > MAXIMA.expressionLength ? length : shifted;
}
