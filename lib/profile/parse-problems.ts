import type { z } from "zod";
import type { PathMessage } from "@/lib/result";

/** More complaints than anybody reads; bounds the answer to a hostile document. */
export const MAX_PROBLEMS = 100;

/** `["slots", 2, "name"]` → `slots[2].name`: positions in the file, since a number or key may be what is wrong. */
export function positionPath(parts: readonly PropertyKey[]): string {
  return parts.reduce<string>((path, part) => {
    if (typeof part === "number") return `${path}[${part}]`;
    return path === "" ? String(part) : `${path}.${String(part)}`;
  }, "");
}

const kinds: Readonly<Record<string, string>> = {
  string: "a text",
  number: "a number",
  int: "a whole number",
  boolean: "true or false",
  object: "a group of fields",
  array: "a list",
  tuple: "a pair of numbers",
  record: "a group of fields",
};

function sizeMessage(issue: z.core.$ZodIssueTooBig | z.core.$ZodIssueTooSmall): string {
  const bound = issue.code === "too_big" ? `at most ${issue.maximum}` : `at least ${issue.minimum}`;
  if (issue.origin === "string") return `Its length must be ${bound}.`;
  return issue.origin === "array" ? `The number of entries must be ${bound}.` : `Must be ${bound}.`;
}

function message(issue: z.core.$ZodIssue): string {
  if (issue.code === "invalid_type") return `Must be ${kinds[issue.expected] ?? issue.expected}.`;
  if (issue.code === "too_big" || issue.code === "too_small") return sizeMessage(issue);
  if (issue.code === "invalid_value") return `Must be one of: ${issue.values.map(String).join(", ")}.`;
  if (issue.code === "unrecognized_keys") return `The format has no such field: ${issue.keys.slice(0, 5).join(", ")}.`;
  if (issue.code === "custom") return `It ${issue.message}.`;
  if (issue.code === "invalid_format" && issue.message.includes("control")) return "Must have no control characters.";
  return "Is not of the form that the document wants.";
}

/** What a schema found, one sentence each, in the order of the document, `MAX_PROBLEMS` at most. */
export function schemaProblems(error: z.ZodError): PathMessage[] {
  return error.issues
    .slice(0, MAX_PROBLEMS)
    .map((issue) => ({ path: positionPath(issue.path), message: message(issue) }));
}
