import { createHash } from 'node:crypto';
import {
  lstatSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { recoverFolder, StagedFolder } from '../../src/file/staged-folder.js';
import { newFolder } from '../new-folder.js';

const filesOf = (folder: string): string[] => readdirSync(folder).sort();

describe('a staged folder', () => {
  test('is not to be seen at its target before it is committed', () => {
    const parent = newFolder();
    const staged = new StagedFolder(join(parent, 'out'));
    staged.write('a.txt', 'a');
    expect(filesOf(parent)).toEqual(['.out.lock', '.out.partial']);
    staged.commit();
    expect(filesOf(parent)).toEqual(['out']);
    expect(filesOf(join(parent, 'out'))).toEqual(['a.txt']);
  });

  test('replaces the folder that was there, whole', () => {
    const parent = newFolder();
    for (const name of ['first.txt', 'second.txt']) {
      const staged = new StagedFolder(join(parent, 'out'));
      staged.write(name, name);
      staged.commit();
    }
    expect(filesOf(parent)).toEqual(['out']);
    expect(filesOf(join(parent, 'out'))).toEqual(['second.txt']);
  });

  test('leaves nothing when it is abandoned, and the target as it was', () => {
    const parent = newFolder();
    mkdirSync(join(parent, 'out'));
    writeFileSync(join(parent, 'out', 'old.txt'), 'old');
    const staged = new StagedFolder(join(parent, 'out'));
    staged.write('new.txt', 'new');
    staged.abandon();
    expect(filesOf(parent)).toEqual(['out']);
    expect(filesOf(join(parent, 'out'))).toEqual(['old.txt']);
  });

  test('tells size and SHA-256 of a file written in pieces from a buffer that is reused', () => {
    const staged = new StagedFolder(join(newFolder(), 'out'));
    const file = staged.file('inner/pieces.bin');
    const piece = new Uint8Array(3);
    for (let value = 1; value <= 4; value++) file.write(piece.fill(value));
    const bytes = Buffer.from([1, 1, 1, 2, 2, 2, 3, 3, 3, 4, 4, 4]);
    expect(file.end()).toEqual({
      path: 'inner/pieces.bin',
      bytes: 12,
      sha256: createHash('sha256').update(bytes).digest('hex'),
    });
    staged.commit();
    expect(readFileSync(join(staged.target, 'inner/pieces.bin'))).toEqual(bytes);
  });

  test('makes the folders above its target', () => {
    const target = join(newFolder(), 'a', 'b', 'out');
    new StagedFolder(target).commit();
    expect(filesOf(target)).toEqual([]);
  });

  test('cannot be made where a file stands in the way of its parent', () => {
    const parent = newFolder();
    writeFileSync(join(parent, 'file'), '');
    expect(() => new StagedFolder(join(parent, 'file', 'out'))).toThrow(/in the way/);
  });
});

// Above the largest number that systems give to a process.
const DEAD = '999999999\n';

/** Every state that a kill can leave, with what the target then holds. */
const KILLED = {
  'when it has only taken the lock': { lock: true, target: 'old' },
  'before the lock has its name': { draft: true, target: 'old' },
  'while it writes': { lock: true, staging: 'half', target: 'old' },
  'between the two renames': { lock: true, staging: 'new', previous: 'old' },
  'before the old folder is removed': { lock: true, target: 'new', previous: 'old' },
  'before the lock is released': { lock: true, target: 'new' },
  'while it writes for the first time': { lock: true, staging: 'half' },
} as const;

interface Left {
  readonly lock?: boolean;
  readonly draft?: boolean;
  readonly target?: string;
  readonly staging?: string;
  readonly previous?: string;
}

function leave(parent: string, { lock, draft, target, staging, previous }: Left): void {
  const put = (name: string, holds: string | undefined): void => {
    if (holds === undefined) return;
    mkdirSync(join(parent, name));
    writeFileSync(join(parent, name, 'holds.txt'), holds);
  };
  put('out', target);
  put('.out.partial', staging);
  put('.out.previous', previous);
  if (lock === true) writeFileSync(join(parent, '.out.lock'), DEAD);
  if (draft === true) writeFileSync(join(parent, '.out.lock.999999999'), DEAD);
}

describe.each(Object.entries(KILLED))('a run killed %s', (_, left: Left) => {
  const expected = left.target ?? left.previous;

  test('leaves what a reader mends to one whole folder, or none', () => {
    const parent = newFolder();
    leave(parent, left);
    recoverFolder(join(parent, 'out'));
    const present = filesOf(parent).filter((name) => !name.startsWith('.out.lock.'));
    expect(present).toEqual(expected === undefined ? [] : ['out']);
    if (expected !== undefined) {
      expect(readFileSync(join(parent, 'out', 'holds.txt'), 'utf8')).toBe(expected);
    }
  });

  test('does not stand in the way of the next', () => {
    const parent = newFolder();
    leave(parent, left);
    const staged = new StagedFolder(join(parent, 'out'));
    staged.write('holds.txt', 'newest');
    staged.commit();
    expect(filesOf(parent).filter((name) => !name.startsWith('.out.lock.'))).toEqual(['out']);
    expect(readFileSync(join(parent, 'out', 'holds.txt'), 'utf8')).toBe('newest');
  });
});

describe('a folder that another process is writing', () => {
  // Process 1 is always alive, and not ours to signal.
  const held = (): string => {
    const parent = newFolder();
    leave(parent, { target: 'old', staging: 'half' });
    writeFileSync(join(parent, '.out.lock'), '1\n');
    return parent;
  };

  test('is refused to a second writer', () => {
    expect(() => new StagedFolder(join(held(), 'out'))).toThrow(/process 1 is writing here/);
  });

  test('is left as it is by a reader', () => {
    const parent = held();
    recoverFolder(join(parent, 'out'));
    expect(filesOf(parent)).toEqual(['.out.lock', '.out.partial', 'out']);
  });
});

describe('folders that only have the names', () => {
  test('are left alone, and writing is refused', () => {
    const parent = newFolder();
    leave(parent, { staging: 'mine', previous: 'mine too' });
    recoverFolder(join(parent, 'out'));
    expect(() => new StagedFolder(join(parent, 'out'))).toThrow(/bears a name that is needed/);
    expect(filesOf(parent)).toEqual(['.out.partial', '.out.previous']);
  });
});

describe('a target that is a symbolic link', () => {
  test('stays one: the folder it leads to is replaced', () => {
    const parent = newFolder();
    mkdirSync(join(parent, 'real'));
    symlinkSync(join(parent, 'real'), join(parent, 'out'));
    const staged = new StagedFolder(join(parent, 'out'));
    staged.write('a.txt', 'a');
    staged.commit();
    expect(lstatSync(join(parent, 'out')).isSymbolicLink()).toBe(true);
    expect(filesOf(join(parent, 'real'))).toEqual(['a.txt']);
  });
});
