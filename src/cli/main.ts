#!/usr/bin/env node
/** The program. Commands load the library only when they run, so that help is quick. */
import { Command } from '@commander-js/extra-typings';
import { CommanderError } from 'commander';
import { VERSION } from '../version.js';
import { curveCommand } from './curve.js';
import { demoCommand } from './demo.js';
import { emitCommand } from './emit.js';
import { fitCommand } from './fit.js';
import { fitCurveCommand } from './fit-curve.js';
import { schemaCommand } from './schema.js';
import { verifyCommand } from './verify.js';

const USAGE_EXIT = 2;

const program = new Command('hillproof')
  .description(
    'Proves that maximum-power-point-tracking firmware finds and holds the peak:\n' +
      'PV source models from datasheets, weather, fixed-point vectors for firmware and bench.',
  )
  .version(VERSION)
  .showHelpAfterError('Run with --help for usage.')
  .exitOverride();

for (const command of [
  fitCommand(),
  fitCurveCommand(),
  curveCommand(),
  emitCommand(),
  verifyCommand(),
  schemaCommand(),
  demoCommand(),
]) {
  program.addCommand(command.copyInheritedSettings(program));
}
program.addHelpText(
  'after',
  '\nExit codes: 0 done, 1 a check failed, 2 bad input or usage, 3 disk or foreign program.\n' +
    'Emulated strings reach lethal DC voltages: follow the local electrical code and the\n' +
    'manuals of your equipment, and leave the wiring to qualified people.',
);

// A reader that closes the pipe early, such as head, is not an error.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0);
  process.stderr.write(`error DISK stdout: ${error.message}\n`);
  process.exit(3);
});

try {
  await program.parseAsync();
} catch (error) {
  if (error instanceof CommanderError) {
    process.exitCode = error.exitCode === 0 ? 0 : USAGE_EXIT;
  } else {
    const { reportFault } = await import('./print.js');
    process.exitCode = reportFault(error, process.argv.includes('--json'));
  }
}
