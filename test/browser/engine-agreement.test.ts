import { execFileSync } from 'node:child_process';
import { join } from 'node:path';
import { build } from 'esbuild';
import { chromium } from 'playwright-core';
import { expect, test } from 'vitest';
import { GOLDEN_CHECKSUM } from '../numeric/million-results.js';

const browser = pathOfChromium();
const title = 'a million results of exp, expm1, log and log1p have the same bits in Chromium';

test.skipIf(browser === undefined)(
  browser === undefined ? `${title} (skipped: no "chromium" on the PATH)` : title,
  async () => {
    const page = await (await launch()).newPage();
    try {
      const script = `${await bundle()} agreement.checksumOfAMillionResults()`;
      const checksum = await page.evaluate<number>(script);
      expect(checksum.toString(16)).toBe(GOLDEN_CHECKSUM.toString(16));
    } finally {
      await page.context().browser()?.close();
    }
  },
);

function pathOfChromium(): string | undefined {
  try {
    return execFileSync('sh', ['-c', 'command -v chromium'], { encoding: 'utf8' }).trim();
  } catch {
    return undefined;
  }
}

function launch() {
  return chromium.launch({
    executablePath: browser!,
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

async function bundle(): Promise<string> {
  const { outputFiles } = await build({
    entryPoints: [join(import.meta.dirname, '../numeric/million-results.ts')],
    bundle: true,
    write: false,
    format: 'iife',
    globalName: 'agreement',
    platform: 'browser',
  });
  return outputFiles[0]!.text;
}
