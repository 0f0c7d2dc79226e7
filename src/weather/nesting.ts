import { Fault } from '../fault.js';
import type { FieldPath, InputDocument } from '../file/document.js';
import { fieldProblem } from '../file/definition.js';
import { DEEPEST_NESTING } from './definition.js';

/**
 * Refuses a document whose blocks nest too deeply, before anything recurses into it: everything
 * after this may rely on the depth. Looks only at what has the shape of blocks.
 * @throws Fault `TOO_DEEP` at the first block that is too deep.
 */
export function refuseDeepNesting(document: InputDocument): void {
  visit(document, document.value, [], 0);
}

function visit(document: InputDocument, holder: unknown, path: FieldPath, depth: number): void {
  const blocks = member(holder, 'blocks');
  if (!Array.isArray(blocks)) return;
  const inside = [...path, 'blocks'];
  if (depth > DEEPEST_NESTING) {
    throw new Fault(
      'input',
      fieldProblem(document, inside, {
        code: 'TOO_DEEP',
        message: `at most ${DEEPEST_NESTING} repeats and sequences may stand around a block, found ${depth}.`,
        hint: 'A sequence inside a sequence can be written as one.',
      }),
    );
  }
  for (const [index, block] of blocks.entries()) {
    for (const name of NESTING_BLOCKS) {
      visit(document, member(block, name), [...inside, index, name], depth + 1);
    }
  }
}

const NESTING_BLOCKS = ['repeat', 'sequence'] as const;

const member = (value: unknown, key: string): unknown =>
  typeof value === 'object' && value !== null ? (value as Record<string, unknown>)[key] : undefined;
