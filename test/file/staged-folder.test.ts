import { createHash } from 'node:crypto';
import { mkdirSync, readdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
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
    expect(filesOf(parent)).toEqual(['.out.partial']);
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

  test('clears away what a dead process left', () => {
    const parent = newFolder();
    mkdirSync(join(parent, '.out.partial'));
    // No process has this number: it is above the largest that systems give.
    writeFileSync(join(parent, '.out.partial', '.owner'), '999999999\n');
    new StagedFolder(join(parent, 'out')).commit();
    expect(filesOf(parent)).toEqual(['out']);
  });

  test('cannot be made where a file stands in the way of its parent', () => {
    const parent = newFolder();
    writeFileSync(join(parent, 'file'), '');
    expect(() => new StagedFolder(join(parent, 'file', 'out'))).toThrow(/in the way/);
  });
});

describe('recovery', () => {
  test('puts the old folder back when the new one never arrived', () => {
    const parent = newFolder();
    mkdirSync(join(parent, '.out.previous'));
    writeFileSync(join(parent, '.out.previous', '.set-aside'), '');
    recoverFolder(join(parent, 'out'));
    expect(filesOf(parent)).toEqual(['out']);
    expect(filesOf(join(parent, 'out'))).toEqual([]);
  });

  test('takes the mark off a folder that was never set aside', () => {
    const out = newFolder();
    writeFileSync(join(out, '.set-aside'), '');
    recoverFolder(out);
    expect(filesOf(out)).toEqual([]);
  });

  test('leaves folders alone that only have the names', () => {
    const parent = newFolder();
    mkdirSync(join(parent, '.out.previous'));
    mkdirSync(join(parent, '.out.partial'));
    writeFileSync(join(parent, '.out.partial', 'data.txt'), 'mine');
    recoverFolder(join(parent, 'out'));
    expect(() => new StagedFolder(join(parent, 'out'))).toThrow(/is in the way/);
    expect(filesOf(parent)).toEqual(['.out.partial', '.out.previous']);
    expect(filesOf(join(parent, '.out.partial'))).toEqual(['data.txt']);
  });

  test('drops the old folder when the new one is in place', () => {
    const parent = newFolder();
    mkdirSync(join(parent, 'out'));
    writeFileSync(join(parent, 'out', '.set-aside'), '');
    renameSync(join(parent, 'out'), join(parent, '.out.previous'));
    mkdirSync(join(parent, 'out'));
    recoverFolder(join(parent, 'out'));
    expect(filesOf(parent)).toEqual(['out']);
  });
});
