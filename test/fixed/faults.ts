import { Fault, type Problem } from '../../src/fault.js';

/** The one problem of the Fault that `action` throws. */
export function problemOf(action: () => unknown): Problem {
  try {
    action();
  } catch (error) {
    if (error instanceof Fault && error.problems.length === 1) return error.problems[0]!;
    throw error;
  }
  throw new Error('nothing was thrown');
}
