import { expect } from 'vitest';
import { Fault } from '../../src/fault.js';

/** The Fault that `action` throws. */
export function faultOf(action: () => unknown): Fault {
  try {
    action();
  } catch (error) {
    expect(error).toBeInstanceOf(Fault);
    return error as Fault;
  }
  return expect.unreachable('nothing was thrown');
}
