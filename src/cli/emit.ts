import { Command } from '@commander-js/extra-typings';
import type { Emission } from '../index.js';

export function emitCommand() {
  return new Command('emit')
    .description('Build the vectors of a suite: binary, C99, CSV, JSON and a manifest.')
    .argument('<suite>', 'suite file')
    .requiredOption('--out <folder>', 'folder to build; an older suite in it is replaced')
    .option('--json', 'print the manifest')
    .action(async (file, options) => {
      const { emitSuite } = await import('../index.js');
      const { printJson, sayWarnings } = await import('./print.js');
      const { ProgressLine } = await import('./progress.js');
      const line = new ProgressLine();
      const emission = emitSuite(file, options.out, {
        progress: (product, done, total) => {
          line.show(product, done, total);
        },
      });
      line.clear();
      sayWarnings(emission.suite.warnings);
      if (options.json === true) printJson(emission.manifest);
      else await printEmission(emission);
    });
}

/** What was made and where it lies. */
export async function printEmission({ folder, manifest }: Emission): Promise<void> {
  const { colours, printLine, printTable } = await import('./print.js');
  printLine(`${colours.bold(manifest.suite)} in ${folder}`);
  printLine();
  printTable(
    ['file', 'bytes', 'holds'],
    manifest.products.flatMap(({ files, sections }) =>
      files.map(({ path, bytes }) => [
        path,
        String(bytes),
        sections.map(({ tag, records }) => `${records} ${SECTION_NOUNS[tag] ?? tag}`).join(', '),
      ]),
    ),
  );
  for (const { name, saturated } of manifest.products) {
    for (const { column, low, high } of saturated) {
      printLine(`  ${name}: ${column} saturated ${low} times low, ${high} times high`);
    }
  }
}

const SECTION_NOUNS: Readonly<Record<string, string>> = {
  CURV: 'curves',
  POIN: 'points',
  PEAK: 'peaks',
  SAMP: 'samples',
};
