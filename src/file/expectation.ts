/** The words for what a definition expects and what was found. */
import type { z } from 'zod';
import { suggestNear } from './nearest.js';

type Issue = z.core.$ZodIssue;

// A list or text has a size; everything else is what it is.
/** The verb between `must` and the expectation. */
export const verb = (issue: Issue): string =>
  'origin' in issue && (issue.origin === 'array' || issue.origin === 'string') ? 'have' : 'be';

/** What a value would have to be: completes `must be`. */
export function expectation(issue: Issue): string {
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
      return formsOf(issue);
    default:
      return issue.message;
  }
}

function formsOf(issue: z.core.$ZodIssueInvalidUnion): string {
  const forms = issue.errors.flatMap(([first]) =>
    first === undefined ? [] : [expectation(first)],
  );
  return forms.length === 0 ? 'one of the forms this key takes' : [...new Set(forms)].join(' or ');
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

/** What is likely meant, if the slip is a known one. */
export function hintFor(issue: Issue, found: unknown): string | undefined {
  if (issue.code === 'invalid_value' && typeof found === 'string') {
    // The message lists the values, so only a likely one is worth a word.
    return suggestNear(found, issue.values.map(String));
  }
  if (issue.code !== 'invalid_type' || typeof found !== 'string') return undefined;
  if (/^[+-]?\d+,\d+$/.test(found)) return 'Write the decimal mark as a point.';
  if (/^[+-]?[\d.]+\s*\D+$/.test(found)) return 'Write the number alone: the key names the unit.';
  return undefined;
}

/** A value as it was found, fit for a message on a terminal. */
export function show(found: unknown): string {
  if (found === null) return 'nothing';
  if (Array.isArray(found)) return `a list of ${found.length}`;
  if (typeof found === 'object') return 'a group of keys';
  if (typeof found === 'string') return JSON.stringify(found.slice(0, 60));
  // JSON has no word for what is not finite.
  return typeof found === 'number' ? String(found) : JSON.stringify(found);
}
