/**
 * Expressions over a scene's parameters: numbers, names, + − * / ( ), sqrt, sin, cos, tan (degrees), min, max.
 * Parsed by jsep, then evaluated over a whitelist of node types; nothing else of JavaScript can be reached.
 */
import jsep from "jsep";
import { MAXIMA } from "./limits.js";

/** Why an expression has no value; the message is a sentence. */
export class ExpressionError extends Error {
  override name = "ExpressionError";
}

export type Evaluation = { ok: true; value: number } | { ok: false; sentence: string };

const radians = (degrees: number): number => (degrees * Math.PI) / 180;

/** Exact at the multiples of 90°, so that sin(180) is 0 and cos(90) is 0. */
const sinDegrees = (degrees: number): number => {
  const turn = ((degrees % 360) + 360) % 360;
  if (turn === 0 || turn === 180) return 0;
  if (turn === 90) return 1;
  if (turn === 270) return -1;
  return Math.sin(radians(turn));
};
const cosDegrees = (degrees: number): number => sinDegrees(degrees + 90);

interface FunctionRule {
  fewest: number;
  most: number;
  apply: (values: readonly number[]) => number;
}
const one = (apply: (value: number) => number): FunctionRule => ({
  fewest: 1,
  most: 1,
  apply: (values) => apply(values[0] ?? Number.NaN),
});
const FUNCTIONS: ReadonlyMap<string, FunctionRule> = new Map([
  ["sqrt", one(Math.sqrt)],
  ["sin", one(sinDegrees)],
  ["cos", one(cosDegrees)],
  ["tan", one((degrees) => sinDegrees(degrees) / cosDegrees(degrees))],
  ["min", { fewest: 1, most: 20, apply: (values) => Math.min(...values) }],
  ["max", { fewest: 1, most: 20, apply: (values) => Math.max(...values) }],
]);

/** Names that an expression may call, hence no parameter may bear. */
export const FUNCTION_NAMES: readonly string[] = [...FUNCTIONS.keys()];

const NOT_ALLOWED = `use numbers, parameters, + - * / ( ) and ${FUNCTION_NAMES.join(", ")}`;

const isNode = (value: unknown): value is jsep.Expression =>
  typeof value === "object" && value !== null && typeof (value as { type?: unknown }).type === "string";

const word = (value: unknown): string => (typeof value === "string" ? value : typeof value);

const child = (node: jsep.Expression, key: string): jsep.Expression => {
  const value = node[key];
  if (!isNode(value)) throw new ExpressionError(`It is incomplete; ${NOT_ALLOWED}.`);
  return value;
};

const evaluateCall = (node: jsep.Expression, values: ReadonlyMap<string, number>, depth: number): number => {
  const callee = child(node, "callee");
  const name = callee.type === "Identifier" ? callee.name : undefined;
  const rule = typeof name === "string" ? FUNCTIONS.get(name) : undefined;
  if (rule === undefined)
    throw new ExpressionError(
      `It calls ${typeof name === "string" ? `"${name}"` : "something"} that is no function here; ${NOT_ALLOWED}.`,
    );
  const given = Array.isArray(node.arguments) ? (node.arguments as readonly unknown[]) : [];
  if (given.length < rule.fewest || given.length > rule.most)
    throw new ExpressionError(
      `${word(name)} takes ${rule.most === 1 ? "one value" : `${String(rule.fewest)} to ${String(rule.most)} values`}, not ${String(given.length)}.`,
    );
  return rule.apply(
    given.map((argument) => {
      if (!isNode(argument)) throw new ExpressionError(`A value between commas is missing; ${NOT_ALLOWED}.`);
      return evaluateNode(argument, values, depth + 1);
    }),
  );
};

const evaluateBinary = (
  node: jsep.Expression,
  values: ReadonlyMap<string, number>,
  depth: number,
): number => {
  const left = evaluateNode(child(node, "left"), values, depth + 1);
  const right = evaluateNode(child(node, "right"), values, depth + 1);
  switch (node.operator) {
    case "+":
      return left + right;
    case "-":
      return left - right;
    case "*":
      return left * right;
    case "/":
      return left / right;
    default:
      throw new ExpressionError(`The operator "${word(node.operator)}" is not allowed; ${NOT_ALLOWED}.`);
  }
};

const evaluateNode = (node: jsep.Expression, values: ReadonlyMap<string, number>, depth: number): number => {
  // Binary chains such as a+b+c nest to the left without parentheses, so they get the length's room.
  if (depth > MAXIMA.expressionLength)
    throw new ExpressionError("It nests too deeply; split it into parameters.");
  switch (node.type) {
    case "Literal":
      if (typeof node.value === "number") return node.value;
      throw new ExpressionError(`${word(node.raw)} is not a number; ${NOT_ALLOWED}.`);
    case "Identifier": {
      const name = word(node.name);
      const value = values.get(name);
      if (value === undefined)
        throw new ExpressionError(
          FUNCTIONS.has(name)
            ? `The function "${name}" needs its values in parentheses.`
            : `"${name}" is no parameter defined before this place; define it in "parameters" or check its spelling.`,
        );
      return value;
    }
    case "UnaryExpression": {
      const value = evaluateNode(child(node, "argument"), values, depth + 1);
      if (node.operator === "-") return -value;
      if (node.operator === "+") return value;
      throw new ExpressionError(`The operator "${word(node.operator)}" is not allowed; ${NOT_ALLOWED}.`);
    }
    case "BinaryExpression":
      return evaluateBinary(node, values, depth);
    case "CallExpression":
      return evaluateCall(node, values, depth);
    default:
      throw new ExpressionError(`It is not one arithmetic expression; ${NOT_ALLOWED}.`);
  }
};

const nesting = (text: string): number => {
  let depth = 0;
  let deepest = 0;
  for (const character of text) {
    if (character === "(") deepest = Math.max(deepest, ++depth);
    else if (character === ")") depth -= 1;
  }
  return deepest;
};

const parse = (text: string): jsep.Expression => {
  try {
    return jsep(text);
  } catch (error) {
    const reason = error instanceof Error ? error.message.replace(/\.$/, "") : "it cannot be read";
    throw new ExpressionError(`It cannot be read as an expression (${reason}); ${NOT_ALLOWED}.`);
  }
};

/**
 * The value of an expression over `values` (parameter name → mm).
 * A syntax error, an unknown name or a value that is not finite comes back as a sentence.
 */
export const evaluateExpression = (text: string, values: ReadonlyMap<string, number>): Evaluation => {
  if (text.length > MAXIMA.expressionLength)
    return {
      ok: false,
      sentence: `It has more than ${String(MAXIMA.expressionLength)} characters; use parameters.`,
    };
  if (nesting(text) > MAXIMA.expressionDepth)
    return {
      ok: false,
      sentence: `Its parentheses nest deeper than ${String(MAXIMA.expressionDepth)}; use parameters.`,
    };
  try {
    const value = evaluateNode(parse(text), values, 0);
    // −0 would hash and print differently from 0.
    if (Number.isFinite(value)) return { ok: true, value: value === 0 ? 0 : value };
    return { ok: false, sentence: `"${text}" gives ${String(value)}; it must give a finite number.` };
  } catch (error) {
    if (error instanceof ExpressionError) return { ok: false, sentence: error.message };
    throw error;
  }
};
