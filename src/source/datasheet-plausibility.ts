/**
 * What a datasheet cannot say, and what it says only by a slip of the pen. Impossible values are
 * errors, odd ones warnings; each tells why.
 */
import type { Problem } from '../fault.js';
import { fieldProblem } from '../file/definition.js';
import type { InputDocument } from '../file/document.js';
import type { DatasheetEntries } from './datasheet-definition.js';
import type { Finding } from './plausibility/finding.js';
import { heatFindings } from './plausibility/heat.js';
import { pointFindings } from './plausibility/points.js';

export interface DatasheetProblems {
  readonly errors: readonly Problem[];
  readonly warnings: readonly Problem[];
}

/** @param document The one that the entries come from: it knows their places. */
export function datasheetProblems(
  entries: DatasheetEntries,
  document: InputDocument,
): DatasheetProblems {
  const findings = [...pointFindings(entries), ...heatFindings(entries)];
  const problems = (wanted: Finding['severity']): Problem[] =>
    findings
      .filter(({ severity }) => severity === wanted)
      .map(({ field, code, message, hint }) =>
        fieldProblem(document, [field], {
          code,
          message,
          ...(hint === undefined ? {} : { hint }),
        }),
      );
  return { errors: problems('error'), warnings: problems('warning') };
}
