/**
 * Holds a document against the definition of its type. One definition (a zod schema) validates,
 * gives the TypeScript type, and is printed as the JSON Schema that editors use.
 */
import type { z } from 'zod';
import { Fault, type Problem } from '../fault.js';
import { fieldText, type FieldPath, type InputDocument } from './document.js';
import { keysAt } from './definition-keys.js';
import { suggest } from './nearest.js';

/** @throws Fault with every departure from the definition, each with its place. */
export function interpret<Schema extends z.ZodType>(
  document: InputDocument,
  definition: Schema,
): z.output<Schema> {
  const result = definition.safeParse(document.value);
  if (result.success) return result.data;
  const problems = result.error.issues.flatMap((issue) =>
    problemsOf(issue, [], document, definition),
  );
  throw new Fault('input', problems);
}

type Issue = z.core.$ZodIssue;

function problemsOf(
  issue: Issue,
  outer: FieldPath,
  document: InputDocument,
  definition: z.ZodType,
): Problem[] {
  const path = [...outer, ...issue.path];
  if (issue.code === 'unrecognized_keys') {
    const known = keysAt(definition, path);
    return issue.keys.map((key) => ({
      code: 'UNKNOWN_KEY',
      ...document.placeOfKey([...path, key]),
      message: 'is not a key known here.',
      hint: suggest(key, known),
    }));
  }
  if (issue.code === 'invalid_union') {
    const nearestBranch = closestBranch(issue);
    if (nearestBranch !== undefined) {
      return nearestBranch.flatMap((inner) => problemsOf(inner, path, document, definition));
    }
  }
  return [describe(issue, path, document)];
}

// Of the alternatives of a union, the one whose complaints lie deepest is what the writer meant.
function closestBranch(issue: z.core.$ZodIssueInvalidUnion): Issue[] | undefined {
  const depth = (issues: Issue[]): number =>
    Math.max(
      ...issues.map((inner) => inner.path.length + (inner.code === 'unrecognized_keys' ? 1 : 0)),
    );
  const branches = issue.errors.filter((issues) => issues.length > 0 && depth(issues) > 0);
  const [first, ...rest] = branches;
  if (first === undefined) return undefined;
  return rest.reduce((best, branch) => {
    const gain = depth(branch) - depth(best);
    return gain > 0 || (gain === 0 && branch.length < best.length) ? branch : best;
  }, first);
}

function describe(issue: Issue, path: FieldPath, document: InputDocument): Problem {
  const found = valueAt(document.value, path);
  const place = document.place(path);
  if (found === undefined && issue.code !== 'custom') {
    return {
      code: 'MISSING_KEY',
      ...place,
      message: `is missing: expected ${expectation(issue)}.`,
    };
  }
  const hint = hintFor(issue, found);
  return {
    code: 'INVALID_VALUE',
    ...place,
    message: `must ${verb(issue)} ${expectation(issue)}, found ${show(found)}.`,
    ...(hint === undefined ? {} : { hint }),
  };
}

// A list or text has a size; everything else is what it is.
const verb = (issue: Issue): string =>
  'origin' in issue && (issue.origin === 'array' || issue.origin === 'string') ? 'have' : 'be';

function expectation(issue: Issue): string {
  switch (issue.code) {
    case 'invalid_type':
      return NAMES_OF_TYPES[issue.expected] ?? `a ${issue.expected}`;
    case 'too_small':
      return `${issue.inclusive === true ? 'at least' : 'above'} ${issue.minimum}${ofWhat(issue.origin, issue.minimum)}`;
    case 'too_big':
      return `${issue.inclusive === true ? 'at most' : 'below'} ${issue.maximum}${ofWhat(issue.origin, issue.maximum)}`;
    case 'invalid_value':
      return issue.values.length === 1
        ? show(issue.values[0])
        : `one of ${issue.values.map(String).join(', ')}`;
    case 'invalid_union':
      return 'one of the forms this key takes';
    default:
      return issue.message;
  }
}

function ofWhat(origin: string, count: number | bigint): string {
  const one = Number(count) === 1;
  if (origin === 'string') return one ? ' character' : ' characters';
  if (origin === 'array') return one ? ' entry' : ' entries';
  return '';
}

const NAMES_OF_TYPES: Readonly<Record<string, string>> = {
  number: 'a number',
  int: 'a whole number',
  string: 'text',
  boolean: 'true or false',
  object: 'a group of keys',
  array: 'a list',
};

function hintFor(issue: Issue, found: unknown): string | undefined {
  if (issue.code === 'invalid_value' && typeof found === 'string') {
    return suggest(found, issue.values.map(String));
  }
  if (issue.code !== 'invalid_type' || typeof found !== 'string') return undefined;
  if (/^[+-]?\d+,\d+$/.test(found)) return 'Write the decimal mark as a point.';
  if (/^[+-]?[\d.]+\s*\D+$/.test(found)) return 'Write the number alone: the key names the unit.';
  return undefined;
}

function show(found: unknown): string {
  if (found === null) return 'nothing';
  if (Array.isArray(found)) return `a list of ${found.length}`;
  if (typeof found === 'object') return 'a group of keys';
  if (typeof found === 'string') return `"${found.slice(0, 60)}"`;
  // JSON has no word for what is not finite.
  return typeof found === 'number' ? String(found) : JSON.stringify(found);
}

const valueAt = (value: unknown, path: FieldPath): unknown =>
  path.reduce<unknown>(
    (inner, step) =>
      typeof inner === 'object' && inner !== null
        ? (inner as Record<PropertyKey, unknown>)[step]
        : undefined,
    value,
  );

/** A Problem about one field of a document that the definition alone cannot express. */
export function fieldProblem(
  document: InputDocument,
  path: FieldPath,
  problem: { readonly code: string; readonly message: string; readonly hint?: string },
): Problem {
  return { ...problem, ...document.place(path), field: fieldText(path) };
}
