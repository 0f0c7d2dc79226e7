import { z } from 'zod';

const count = z.int().min(0);
const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

/** Below the suite's folder, with forward slashes, no drive, no step upwards. */
const path = z.string().regex(/^(?!.*(?:^|\/)\.{1,2}(?:\/|$))[^\\:/\0][^\\:\0]*$/);

const listedFile = { path, bytes: count, sha256 };

/** The shape of a manifest. A seal is no signature: what is read is checked all the same. */
export const manifestDefinition = z.strictObject({
  manifest: z.int(),
  suite: z.string(),
  tool: z.strictObject({ name: z.string(), version: z.string() }),
  seeds: z.record(z.string(), z.number()),
  inputs: z.array(z.strictObject({ ...listedFile, named_as: z.string().nullable() })),
  products: z.array(
    z.strictObject({
      name: z.string(),
      kind: z.string(),
      source: z.string(),
      sections: z.array(z.strictObject({ tag: z.string(), records: count })),
      saturated: z.array(z.strictObject({ column: z.string(), low: count, high: count })),
      files: z.array(
        z.strictObject({ ...listedFile, form: z.enum(['binary', 'c', 'csv', 'json']) }),
      ),
    }),
  ),
  seal: sha256,
});
