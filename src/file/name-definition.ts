import { z } from 'zod';

/** A name for people: one line of at most 80 characters, none of which steers a terminal. */
export const nameDefinition = (what: string) =>
  z
    .string()
    .min(1)
    .max(80)
    .regex(/^\P{Cc}*$/u, 'no control characters')
    .describe(what);
