import { createHash } from 'node:crypto';
import {
  existsSync,
  lstatSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { Fault } from '../../src/fault.js';
import { writeWhole } from '../../src/file/written-file.js';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'written-'));
});
afterEach(() => {
  rmSync(folder, { recursive: true });
});

function faultOf(action: () => unknown): Fault {
  try {
    action();
  } catch (error) {
    if (error instanceof Fault) return error;
    throw error;
  }
  throw new Error('nothing was thrown');
}

describe('writeWhole', () => {
  test('writes UTF-8, and says how much and with what hash', () => {
    const path = join(folder, 'model.yaml');
    const text = 'name: Größe\n';
    const written = writeWhole(path, text);
    expect(readFileSync(path, 'utf8')).toBe(text);
    expect(written).toEqual({
      path,
      bytes: 14,
      sha256: createHash('sha256').update(text, 'utf8').digest('hex'),
    });
  });

  test('replaces a file, and leaves nothing beside it', () => {
    const path = join(folder, 'model.yaml');
    writeFileSync(path, 'what was there before, and is longer');
    writeWhole(path, 'new');
    expect(readFileSync(path, 'utf8')).toBe('new');
    expect(readdirSync(folder)).toEqual(['model.yaml']);
  });

  test('clears away what a killed run left beside the target', () => {
    const path = join(folder, 'model.yaml');
    writeFileSync(join(folder, '.model.yaml.partial'), 'half');
    writeWhole(path, 'whole');
    expect(readdirSync(folder)).toEqual(['model.yaml']);
  });

  test('leaves the old file where the new one cannot take its place', () => {
    // A folder of that name cannot be replaced by a file.
    const path = join(folder, 'taken');
    mkdirSync(path);
    writeFileSync(join(path, 'old'), 'old');
    expect(faultOf(() => writeWhole(path, 'new')).problems[0]!.file).toBe(path);
    expect(readdirSync(folder)).toEqual(['taken']);
    expect(readFileSync(join(path, 'old'), 'utf8')).toBe('old');
  });

  test('refuses a folder that is not there, and makes none', () => {
    expect(() => writeWhole(join(folder, 'new', 'model.yaml'), 'new')).toThrow(
      /no such file or folder/,
    );
    expect(existsSync(join(folder, 'new'))).toBe(false);
  });

  test('refuses a device and a folder, and leaves them', () => {
    for (const path of ['/dev/null', folder]) {
      expect(() => writeWhole(path, 'new')).toThrow(/is a folder or a device/);
    }
    expect(statSync('/dev/null').isCharacterDevice()).toBe(true);
  });

  test('follows a symbolic link, which stays', () => {
    const [link, file] = [join(folder, 'link.yaml'), join(folder, 'file.yaml')];
    writeFileSync(file, 'old');
    symlinkSync(file, link);
    writeWhole(link, 'new');
    expect(readFileSync(file, 'utf8')).toBe('new');
    expect(lstatSync(link).isSymbolicLink()).toBe(true);
  });
});
