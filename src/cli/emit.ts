import { Command } from '@commander-js/extra-typings';
import type { Emission, Problem } from '../index.js';

export function emitCommand() {
  return new Command('emit')
    .description('Build the vectors of a suite: binary, C99, CSV, JSON and a manifest.')
    .argument('<suite>', 'suite file')
    .requiredOption('--out <folder>', 'folder to build, required; an older suite in it is replaced')
    .option('--json', 'print the manifest')
    .action(async (file, options) => {
      const { emitSuite } = await import('../index.js');
      const { printJson, sayWarnings } = await import('./print.js');
      const { ProgressLine } = await import('./progress.js');
      const line = new ProgressLine();
      let emission: Emission;
      try {
        emission = emitSuite(file, options.out, {
          progress: (product, done, total) => {
            line.show(product, done, total);
          },
        });
      } finally {
        // A failure must not leave the line running: its timer would keep the program alive.
        line.clear();
      }
      sayWarnings(emission.suite.warnings);
      if (options.json === true) printJson(emission.manifest);
      else await printEmission(emission);
    });
}

/** What was made and where it lies. */
export async function printEmission({ folder, manifest }: Emission): Promise<void> {
  const { colours, counted, printLine, printTable, sayWarnings } = await import('./print.js');
  printLine(`${colours.bold(manifest.suite)} in ${folder}`);
  printLine();
  printTable(
    ['file', 'bytes', 'holds'],
    manifest.products.flatMap(({ files, sections }) =>
      files.map(({ path, bytes }) => [
        path,
        String(bytes),
        sections.map(({ tag, records }) => counted(records, SECTION_NOUNS[tag] ?? tag)).join(', '),
      ]),
    ),
  );
  sayWarnings(saturationWarnings(manifest));
}

const SECTION_NOUNS: Readonly<Record<string, string>> = {
  CURV: 'curve',
  POIN: 'point',
  PEAK: 'peak',
  SAMP: 'sample',
};

// What a channel cannot hold is not an error of the suite: it may be what is to be tried.
const saturationWarnings = ({ products }: Emission['manifest']): Problem[] =>
  products.flatMap(({ name, saturated }) =>
    saturated.map(({ column, low, high }) => ({
      code: 'SATURATED',
      message: `${name}: ${column} took its lowest code ${low} times and its highest ${high} times.`,
      hint: 'If that is not meant, check reference, divider or gain of the format.',
    })),
  );
