import { Argument, Command } from '@commander-js/extra-typings';

const NAMES = ['array', 'datasheet', 'generator', 'model', 'suite', 'weather'] as const;

export function schemaCommand() {
  return new Command('schema')
    .description('Print the JSON Schema of an input file, for editors.')
    .addArgument(new Argument('<kind>', 'kind of file').choices(NAMES))
    .option('--json', 'the same: a schema is JSON')
    .action(async (kind) => {
      const { schemaText } = await import('../index.js');
      process.stdout.write(schemaText(kind));
    });
}
