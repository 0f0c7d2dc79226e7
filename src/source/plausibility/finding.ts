import type { DatasheetEntries } from '../datasheet-definition.js';

/** Something odd or impossible about one field of a datasheet. */
export interface Finding {
  readonly severity: 'error' | 'warning';
  readonly field: keyof DatasheetEntries;
  readonly code: string;
  readonly message: string;
  readonly hint?: string;
}

type Arguments = [field: keyof DatasheetEntries, code: string, message: string, hint?: string];

/** What no module can have: the file is refused. */
export const impossible = (...[field, code, message, hint]: Arguments): Finding => ({
  severity: 'error',
  field,
  code,
  message,
  ...(hint === undefined ? {} : { hint }),
});

/** What some module might have. */
export const odd = (...finding: Arguments): Finding => ({
  ...impossible(...finding),
  severity: 'warning',
});
