/** The textbook Newton loop in C: compiled on the spot, fed through files, timed by itself. */
import { spawnSync } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { doublesOf } from './solver-inputs.mjs';

const SOURCE = fileURLToPath(new URL('newton.c', import.meta.url));

/**
 * Compiles newton.c with `$CC`, or else `cc`.
 * @param folder Where the binary goes.
 * @param flags For optimisation, as `['-O3']`.
 * @returns The path of the binary, or undefined where there is no such compiler.
 */
export function compileNewton(folder, flags) {
  const binary = join(folder, `newton${flags.join('')}`);
  const compiler = process.env.CC ?? 'cc';
  const options = ['-std=c99', '-Wall', '-Wextra', ...flags, '-o', binary, SOURCE, '-lm'];
  const { error, status, stderr } = spawnSync(compiler, options, { encoding: 'utf8' });
  if (error?.code === 'ENOENT') return undefined;
  if (error !== undefined || status !== 0) throw error ?? new Error(`${compiler}: ${stderr}`);
  return binary;
}

/**
 * The program ready to compute one set of inputs.
 * @returns `seconds(passes)`: runs it and gives the processor time of so many passes after a first
 * one; `currents()`: what it computed last.
 */
export function newtonProgram(folder, binary, kernel, inputs) {
  const inputFile = join(folder, `${kernel}.inputs`);
  const currentFile = join(folder, `${kernel}.currents`);
  writeFileSync(inputFile, doublesOf(inputs));
  return {
    seconds(passes) {
      const options = [kernel, String(passes), inputFile, currentFile];
      const { error, status, stdout, stderr } = spawnSync(binary, options, { encoding: 'utf8' });
      if (error !== undefined || status !== 0) throw error ?? new Error(stderr);
      return Number(stdout);
    },
    currents: () => new Float64Array(new Uint8Array(readFileSync(currentFile)).buffer),
  };
}
