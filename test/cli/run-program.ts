import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

export const PROGRAM = fileURLToPath(new URL('../../dist/cli/main.js', import.meta.url));
export const DEMO = fileURLToPath(new URL('../../vectors/demo/', import.meta.url));

export interface Run {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs the built program as a user does, without a terminal. */
export function run(args: readonly string[], cwd = process.cwd()): Run {
  const { status, stdout, stderr } = spawnSync(process.execPath, [PROGRAM, ...args], {
    cwd,
    encoding: 'utf8',
    maxBuffer: 64 * 1024 * 1024,
    env: { ...process.env, LANG: 'C.UTF-8', LC_ALL: 'C.UTF-8' },
  });
  return { status, stdout, stderr };
}
