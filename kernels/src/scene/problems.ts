/** Turns the schema's findings into problems: a path in the document and a sentence a person can act on. */
import type { z } from "zod";
import type { Problem } from "./schema.js";

type Issue = z.core.$ZodIssue;
type Path = readonly PropertyKey[];

/** More problems than this are counted, not listed: a machine-made file can be wrong 200,000 times. */
export const PROBLEMS_LISTED = 1_000;

/** `["paint", 3, "points", 0, 1]` → `paint[3].points[0][1]`. */
export const formatPath = (path: Path): string =>
  path.reduce<string>((text, key) => {
    if (typeof key === "number") return `${text}[${String(key)}]`;
    const name = String(key);
    if (!/^[A-Za-z_$][\w$]*$/.test(name)) return `${text}[${JSON.stringify(name)}]`;
    return text === "" ? name : `${text}.${name}`;
  }, "");

/** The value at a path, or undefined where the document does not reach that far. */
export const valueAt = (document: unknown, path: Path): unknown => {
  let value = document;
  for (const key of path) {
    if (typeof value !== "object" || value === null || !Object.hasOwn(value, key)) return undefined;
    value = (value as Record<PropertyKey, unknown>)[key];
  }
  return value;
};

const TYPE_NAMES: Readonly<Record<string, string>> = {
  number: "a number",
  int: "a whole number",
  string: "a text",
  boolean: "true or false",
  array: "a list",
  tuple: "a list",
  object: "an object",
  record: "an object",
};

const describe = (value: unknown): string => {
  if (value === undefined) return "nothing";
  if (value === null) return "null";
  if (typeof value === "number" && !Number.isFinite(value)) return `${String(value)}, which is not finite`;
  if (Array.isArray(value)) return "a list";
  if (typeof value === "object") return "an object";
  const text =
    typeof value === "string" || typeof value === "number" || typeof value === "boolean"
      ? JSON.stringify(value)
      : typeof value;
  return text.length > 60 ? `${text.slice(0, 57)}…` : text;
};

const quoted = (values: readonly unknown[]): string =>
  values.map((value) => JSON.stringify(value)).join(", ");

const isLengthUnion = (branches: readonly (readonly Issue[])[]): boolean =>
  branches.length === 2 &&
  branches.every((branch) => branch.every((issue) => issue.path.length === 0)) &&
  branches[0]?.[0]?.code !== "unrecognized_keys" &&
  branches.some((branch) =>
    branch.some((issue) => issue.code === "invalid_type" && issue.expected === "string"),
  );

/** A key that decides which form of a medium, a mesh or a limit was meant: the form listed first in its union. */
const FIRST_FORM_KEYS = ["perfect", "cellMm", "points"] as const;

const weight = (branch: readonly Issue[]): number =>
  branch.reduce((sum, issue) => sum + (issue.code === "unrecognized_keys" ? issue.keys.length : 1), 0);

const chooseBranch = (branches: readonly (readonly Issue[])[], value: unknown): readonly Issue[] => {
  const first = branches[0] ?? [];
  if (typeof value === "object" && value !== null && FIRST_FORM_KEYS.some((key) => Object.hasOwn(value, key)))
    return first;
  return branches.reduce((best, branch) => (weight(branch) < weight(best) ? branch : best), first);
};

/** Keys that would decide the form, where the value has none of them: each branch misses a key of its own. */
const missingChoice = (branches: readonly (readonly Issue[])[], value: unknown): string[] | null => {
  if (typeof value !== "object" || value === null) return null;
  const missing = branches.map((branch) =>
    branch
      .filter((issue) => issue.path.length === 1 && valueAt(value, issue.path) === undefined)
      .map((issue) => String(issue.path[0])),
  );
  const own = missing.map((keys) => keys.filter((key) => !missing.every((others) => others.includes(key))));
  return own.every((keys) => keys.length > 0) ? own.map((keys) => keys[0] ?? "") : null;
};

const fromUnion = (
  issue: Extract<Issue, { code: "invalid_union" }>,
  path: Path,
  document: unknown,
): Problem[] => {
  const at = formatPath(path);
  const value = valueAt(document, path);
  const branches = issue.errors;
  if (branches.length === 0) {
    const options = "options" in issue && Array.isArray(issue.options) ? (issue.options as unknown[]) : [];
    const found = value === undefined ? "It is missing" : `It is ${describe(value)}`;
    return [{ path: at, sentence: `${found}; it must be one of ${quoted(options)}.` }];
  }
  if (isLengthUnion(branches)) {
    const typed = branches.find((branch) => branch.every((inner) => inner.code !== "invalid_type"));
    if (typed !== undefined) return typed.flatMap((inner) => fromIssue(inner, path, document));
    const found = value === undefined ? "It is missing" : `It is ${describe(value)}`;
    return [
      {
        path: at,
        sentence: `${found}; give a finite number of millimetres or an expression such as "a/2 - gap".`,
      },
    ];
  }
  const choice = missingChoice(branches, value);
  if (choice !== null) return [{ path: at, sentence: `Give one of ${quoted(choice)} here.` }];
  return chooseBranch(branches, value).flatMap((inner) => fromIssue(inner, path, document));
};

const sizeSentence = (issue: Extract<Issue, { code: "too_small" | "too_big" }>, value: unknown): string => {
  const small = issue.code === "too_small";
  const bound = String(small ? issue.minimum : issue.maximum);
  if (issue.origin === "string")
    return small
      ? `It must have at least ${bound} characters.`
      : `It has more than ${bound} characters; shorten it.`;
  if (issue.origin === "array")
    return small ? `It needs at least ${bound} entries.` : `It has more than ${bound} entries, the maximum.`;
  const limit = small
    ? issue.inclusive === false
      ? `greater than ${bound}`
      : `at least ${bound}`
    : issue.inclusive === false
      ? `less than ${bound}`
      : `at most ${bound}`;
  return `It is ${describe(value)}; it must be ${limit}.`;
};

const fromIssue = (issue: Issue, prefix: Path, document: unknown): Problem[] => {
  const path = [...prefix, ...issue.path];
  const at = formatPath(path);
  const value = valueAt(document, path);
  switch (issue.code) {
    case "unrecognized_keys":
      return issue.keys.map((key) => ({
        path: formatPath([...path, key]),
        sentence: `The key "${key}" is not known here; remove it or check its spelling.`,
      }));
    case "invalid_union":
      return fromUnion(issue, path, document);
    case "invalid_type": {
      const expected = TYPE_NAMES[issue.expected] ?? issue.expected;
      return [
        value === undefined
          ? { path: at, sentence: `It is missing; give ${expected}.` }
          : { path: at, sentence: `It is ${describe(value)}; it must be ${expected}.` },
      ];
    }
    case "invalid_value":
      return [
        {
          path: at,
          sentence: `${value === undefined ? "It is missing" : `It is ${describe(value)}`}; it must be ${issue.values.length > 1 ? "one of " : ""}${quoted(issue.values)}.`,
        },
      ];
    case "too_small":
    case "too_big":
      return [{ path: at, sentence: sizeSentence(issue, value) }];
    default:
      return [{ path: at, sentence: issue.message }];
  }
};

/** All schema issues as problems, in the document's order. */
export const problemsFromIssues = (issues: readonly Issue[], document: unknown): Problem[] =>
  issues.flatMap((issue) => fromIssue(issue, [], document));

/** Cuts a list that is too long to read, and says how much was left out. */
export const listed = (problems: readonly Problem[]): Problem[] =>
  problems.length <= PROBLEMS_LISTED
    ? [...problems]
    : [
        ...problems.slice(0, PROBLEMS_LISTED),
        {
          path: "",
          sentence: `There are ${String(problems.length - PROBLEMS_LISTED)} more problems like these.`,
        },
      ];
