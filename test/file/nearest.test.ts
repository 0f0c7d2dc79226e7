import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { suggest } from '../../src/file/nearest.js';

const KEYS = ['isc_A', 'voc_V', 'imp_A', 'vmp_V', 'cells_in_series', 'noct_C'];
const ALL = `Known here: ${KEYS.join(', ')}.`;
const meant = (key: string): string => `Did you mean ${key}?`;

describe('suggest', () => {
  test.each([
    ['isc', 'isc_A'],
    ['ISC_A', 'isc_A'],
    ['voc_v', 'voc_V'],
    ['cell_in_series', 'cells_in_series'],
    ['cells_in_serise', 'cells_in_series'],
  ])('takes %j for %s', (word, key) => {
    expect(suggest(word, KEYS)).toBe(meant(key));
  });

  test.each(['colour', 'parallel_strings', 'q', ''])('lists all where none is near %j', (word) => {
    expect(suggest(word, KEYS)).toBe(ALL);
  });

  test('takes the first of equals', () => {
    expect(suggest('ab', ['ac', 'ad'])).toBe(meant('ac'));
  });

  test('finds every known word itself, but for its case', () => {
    const words = fc.uniqueArray(fc.stringMatching(/^[a-z_]{1,20}$/), { minLength: 1 });
    fc.assert(
      fc.property(words, (known) => {
        for (const word of known) expect(suggest(word.toUpperCase(), known)).toBe(meant(word));
      }),
      { seed: 91 },
    );
  });

  test('finds a long word with one letter lost, added or changed', () => {
    fc.assert(
      fc.property(fc.nat(14), fc.constantFrom('', 'x', 'cx'), (at, put) => {
        const known = 'cells_in_series';
        const word = known.slice(0, at) + put + known.slice(at + 1);
        expect(suggest(word, KEYS)).toBe(meant(known));
      }),
      { seed: 92 },
    );
  });
});
