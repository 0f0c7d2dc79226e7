import { Fault } from '../fault.js';

/** Runs `work` on what came from a file, and puts its name to problems that name none. */
export function inFile<T>(file: string, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    const problems = error.problems.map((problem) => ({ file, ...problem }));
    throw new Fault(error.kind, problems, { cause: error });
  }
}
