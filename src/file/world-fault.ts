import { Fault } from '../fault.js';

interface SystemError extends Error {
  readonly code: string;
}

const isSystemError = (error: unknown): error is SystemError =>
  error instanceof Error && 'code' in error && typeof error.code === 'string';

/**
 * What the operating system said, as a Fault. A file that is not there is the caller's mistake
 * (`FILE_MISSING`); a disk that is full or a folder that may not be written is the world's (`DISK`).
 * Faults pass through unchanged.
 */
export function worldFault(error: unknown, file: string): Fault {
  if (error instanceof Fault) return error;
  if (!isSystemError(error)) {
    const message = `unexpected failure: ${String(error)}.`;
    return new Fault('world', { code: 'UNEXPECTED', file, message }, { cause: error });
  }
  const inputMistake = INPUT_MISTAKES[error.code];
  if (inputMistake !== undefined) {
    return new Fault(
      'input',
      { code: 'FILE_MISSING', file, message: inputMistake },
      { cause: error },
    );
  }
  const reason = WORLD_REASONS[error.code] ?? `the system reports ${error.code}.`;
  return new Fault('world', { code: 'DISK', file, message: reason }, { cause: error });
}

const INPUT_MISTAKES: Readonly<Record<string, string>> = {
  ENOENT: 'there is no such file or folder.',
  ENOTDIR: 'a part of the path is a file, not a folder.',
  EISDIR: 'expected a file, found a folder.',
};

const WORLD_REASONS: Readonly<Record<string, string>> = {
  ENOSPC: 'no space is left on the disk.',
  EDQUOT: 'the disk quota is used up.',
  EFBIG: 'the file would be larger than the system allows.',
  EACCES: 'access is not permitted.',
  EPERM: 'access is not permitted.',
  EROFS: 'the disk can only be read.',
  EBUSY: 'is in use, such as a mount point: choose a folder inside it.',
  EEXIST: 'something of that name is in the way.',
};
