import { fileURLToPath } from 'node:url';
import { Command } from '@commander-js/extra-typings';

export function demoCommand() {
  return new Command('demo')
    .description('Build and verify the demo suite: an invented module on an invented day.')
    .option('--out <folder>', 'folder to build', 'hillproof-demo')
    .option('--json', 'print one JSON document')
    .action(async (options) => {
      const {
        emitSuite,
        loadSource,
        STC_IRRADIANCE,
        STC_TEMPERATURE,
        uniformConditions,
        verifySuite,
      } = await import('../index.js');
      const { printJson, printLine } = await import('./print.js');
      const inputs = fileURLToPath(new URL('../../vectors/demo/', import.meta.url));
      const emission = emitSuite(`${inputs}suite.yaml`, options.out);
      const verification = verifySuite(options.out);
      if (verification.problems.length > 0) process.exitCode = 1;
      if (options.json === true) {
        printJson({ manifest: emission.manifest, verification });
        return;
      }
      const { pictureOf } = await import('./picture.js');
      const { printEmission } = await import('./emit.js');
      const { printVerification } = await import('./verify.js');
      const { source } = loadSource(`${inputs}module.yaml`);
      printLine(`${source.name} at 1000 W/m², 25 °C`);
      printLine();
      for (const line of pictureOf(source.at(uniformConditions(STC_IRRADIANCE, STC_TEMPERATURE)))) {
        printLine(`  ${line}`);
      }
      printLine();
      await printEmission(emission);
      printLine();
      await printVerification(verification);
      printLine();
      printLine(`Inputs to copy and change: ${inputs}`);
    });
}
