// Closes a CI run: counts the tests, lets no skipped one pass, and prints the line that is read.
import { existsSync, readFileSync } from 'node:fs';

const [, , file, runnerStatus] = process.argv;
if (!existsSync(file)) {
  console.log('The test runner left no report.\n0 passed, 1 failed');
  process.exit(1);
}
const { numPassedTests, numFailedTests, testResults } = JSON.parse(readFileSync(file, 'utf8'));
const all = testResults.flatMap(({ name, assertionResults }) =>
  assertionResults.map(({ fullName, status }) => ({ name, fullName, status })),
);
const skipped = all.filter(({ status }) => status !== 'passed' && status !== 'failed');
for (const { name, fullName } of skipped)
  console.log(`skipped here, and so failed: ${name}: ${fullName}`);
// A file that breaks before its first test fails the runner without a failed test.
const broken = Number(runnerStatus) !== 0 && numFailedTests === 0 ? 1 : 0;
const failed = numFailedTests + skipped.length + broken;
console.log(`${numPassedTests} passed, ${failed} failed`);
process.exit(failed === 0 && numPassedTests > 0 ? 0 : 1);
