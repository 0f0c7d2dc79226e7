import { Command } from '@commander-js/extra-typings';
import type { Verification } from '../index.js';

export function verifyCommand() {
  return new Command('verify')
    .description('Recompute everything about a built suite and say what does not hold.')
    .argument('<folder>', 'folder that emit built')
    .option('--json', 'print one JSON document')
    .action(async (folder, options) => {
      const { verifySuite } = await import('../index.js');
      const { printJson } = await import('./print.js');
      const { ProgressLine } = await import('./progress.js');
      const line = new ProgressLine();
      let verification: Verification;
      try {
        verification = verifySuite(folder, {
          progress: (product, done, total) => {
            line.show(product, done, total);
          },
        });
      } finally {
        // A failure must not leave the line running: its timer would keep the program alive.
        line.clear();
      }
      if (options.json === true) printJson(verification);
      else await printVerification(verification);
      if (verification.problems.length > 0) process.exitCode = 1;
    });
}

export async function printVerification({
  suite,
  checked,
  problems,
  remark,
}: Verification): Promise<void> {
  const { colours, counted, printLine, reportProblems } = await import('./print.js');
  for (const { what, held, of } of checked) {
    printLine(`  ${held === of ? '' : `${held} of `}${of} ${what}`);
  }
  if (remark !== undefined) printLine(`  ${remark}`);
  reportProblems(problems);
  printLine(
    problems.length === 0
      ? remark === undefined
        ? `${colours.green('whole')}: ${suite} holds what its inputs give`
        : `${colours.yellow('whole as far as it could be checked')}: ${suite}`
      : `${colours.red('damaged')}: ${counted(problems.length, 'problem')} in ${suite}`,
  );
}
