/**
 * Holds a document against the definition of its type. One definition (a zod schema) validates,
 * gives the TypeScript type, and is printed as the JSON Schema that editors use.
 */
import type { z } from 'zod';
import { Fault, type Problem } from '../fault.js';
import { fieldText, type FieldPath, type InputDocument } from './document.js';
import { keysAt } from './definition-keys.js';
import { expectation, hintFor, show, verb } from './expectation.js';
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
  if (issue.code === 'invalid_key') {
    return [keyProblem(issue, path, document)];
  }
  if (issue.code === 'invalid_union') {
    const nearestBranch = closestBranch(issue);
    if (nearestBranch !== undefined) {
      return nearestBranch.flatMap((inner) => problemsOf(inner, path, document, definition));
    }
  }
  return [describe(issue, path, document)];
}

// A key that the writer chooses, such as a label: what is wrong with it stands in the inner issues.
function keyProblem(
  issue: z.core.$ZodIssueInvalidKey,
  path: FieldPath,
  document: InputDocument,
): Problem {
  const wanted = issue.issues.map((inner) => `${verb(inner)} ${expectation(inner)}`).join(' and ');
  return {
    code: 'INVALID_KEY',
    ...document.placeOfKey(path),
    message: `is not a key to be used here: it must ${wanted}.`,
  };
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
