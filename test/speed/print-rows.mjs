/** The table of `npm run speed`. */

/** Columns that are set flush right. */
const NUMERIC = new Set([1, 2, 4]);

/** @param rows As `run.mjs` describes them. */
export function printRows(rows) {
  const lines = [
    ['what', 'ours', 'theirs', '', 'ratio', 'target', 'met'],
    ...rows.map((row) => [
      row.what,
      quantity(row.ours, row.unit),
      row.theirs === undefined ? '' : quantity(row.theirs, row.unit),
      row.rival ?? '',
      row.ratio === undefined ? '' : row.ratio.toFixed(2),
      target(row),
      isMet(row),
    ]),
  ];
  const widths = lines[0].map((_, column) => Math.max(...lines.map((line) => line[column].length)));
  for (const line of lines) {
    const cells = line.map((cell, column) =>
      NUMERIC.has(column) ? cell.padStart(widths[column]) : cell.padEnd(widths[column]),
    );
    console.log(cells.join('  ').trimEnd());
  }
  const differences = rows.flatMap(({ difference_A: difference }) => difference ?? []);
  if (differences.length > 0) {
    const most = Math.max(...differences).toExponential(1);
    console.log(`\nThe currents agree with those of C to within ${most} A.`);
  }
}

function quantity(value, unit) {
  return unit === 's' ? `${(value * 1e3).toFixed(1)} ms` : `${(value * 1e-6).toFixed(1)} M ${unit}`;
}

function target({ atLeast, atMost }) {
  if (atLeast !== undefined) return `at least ${atLeast}`;
  return atMost === undefined ? '' : `at most ${atMost}`;
}

function isMet({ ratio, atLeast = -Infinity, atMost = Infinity }) {
  if (ratio === undefined || (atLeast === -Infinity && atMost === Infinity)) return '';
  return ratio >= atLeast && ratio <= atMost ? 'yes' : 'no';
}
