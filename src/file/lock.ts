/** A lock file that names the process that holds it, so that a dead one's lock can be told. */
import { linkSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { Fault } from '../fault.js';

/**
 * Takes the lock at `path`.
 * @throws Fault `BUSY` if it is taken; whoever mends what a dead process left releases its lock.
 */
export function takeLock(path: string): void {
  const draft = `${path}.${process.pid}`;
  try {
    // Linking is atomic and fails if the name is taken, so the lock never stands there empty.
    writeFileSync(draft, `${process.pid}\n`);
    linkSync(draft, path);
  } catch (error) {
    if (!hasCode(error, 'EEXIST')) throw error;
    throw new Fault('world', {
      code: 'BUSY',
      file: path,
      message: `process ${holderOf(path) ?? 'unknown'} is writing here.`,
      hint: 'Wait for it, or remove this file if that process is another program.',
    });
  } finally {
    rmSync(draft, { force: true });
  }
}

export function releaseLock(path: string): void {
  rmSync(path, { force: true });
}

/** Whether a lock is there whose process is not. */
export function lockIsStale(path: string): boolean {
  const holder = holderOf(path);
  return holder !== undefined && !isAlive(holder);
}

function holderOf(path: string): number | undefined {
  try {
    const text = readFileSync(path, 'utf8').trim();
    return /^[1-9]\d*$/.test(text) ? Number(text) : undefined;
  } catch {
    return undefined;
  }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    // Another user's process may not be signalled, but it is there.
    return hasCode(error, 'EPERM');
  }
}

const hasCode = (error: unknown, code: string): boolean =>
  error instanceof Error && 'code' in error && error.code === code;
