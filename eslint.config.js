import js from '@eslint/js';
import tseslint from 'typescript-eslint';

export default tseslint.config(
  { ignores: ['dist', 'build', 'coverage', 'node_modules', 'vectors'] },
  js.configs.recommended,
  {
    files: ['**/*.ts'],
    extends: [tseslint.configs.strictTypeChecked],
    languageOptions: {
      parserOptions: { project: './tsconfig.json', tsconfigRootDir: import.meta.dirname },
    },
    rules: {
      // Numbers are what this project prints.
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
      // Hot loops index typed arrays they have just bounded.
      '@typescript-eslint/no-non-null-assertion': 'off',
      'max-lines': ['error', { max: 400, skipBlankLines: false }],
      'max-lines-per-function': ['error', { max: 60, skipComments: true }],
    },
  },
  {
    // The last bits of these differ between engines: src/numeric has the ones to use.
    files: ['src/**/*.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        ...['exp', 'expm1', 'log', 'log1p', 'log2', 'log10', 'pow', 'sin', 'cos', 'tan', 'asin']
          .concat(['acos', 'atan', 'atan2', 'sinh', 'cosh', 'tanh', 'cbrt', 'hypot', 'random'])
          .map((property) => ({
            object: 'Math',
            property,
            message: 'Engines differ in the last bit (or it is unseeded): use src/numeric.',
          })),
        { object: 'Date', property: 'now', message: 'No clock reaches a result.' },
      ],
      'no-restricted-syntax': [
        'error',
        { selector: "BinaryExpression[operator='**']", message: 'Engines differ: multiply out.' },
        { selector: "NewExpression[callee.name='Date'][arguments.length=0]", message: 'No clock.' },
      ],
    },
  },
  {
    files: ['test/**/*.ts'],
    rules: { 'max-lines-per-function': 'off' },
  },
  {
    files: ['**/*.js', '**/*.mjs', '**/*.cjs'],
    languageOptions: {
      globals: {
        process: 'readonly',
        console: 'readonly',
        Buffer: 'readonly',
        URL: 'readonly',
        WebAssembly: 'readonly',
        module: 'writable',
      },
    },
  },
);
