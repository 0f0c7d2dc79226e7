import type { z } from 'zod';
import type { FieldPath } from './document.js';

/** The keys that the definition allows at `path`, over all alternatives that can stand there. */
export function keysAt(definition: z.ZodType, path: FieldPath): string[] {
  let open: ReadonlySet<unknown> = new Set([definition]);
  for (const step of path) {
    open = new Set(
      [...open].flatMap((schema) => alternatives(schema)).flatMap((schema) => inside(schema, step)),
    );
  }
  const shapes = [...open].flatMap((schema) => alternatives(schema)).map(shapeOf);
  return [...new Set(shapes.flatMap((shape) => Object.keys(shape)))];
}

interface Inner {
  readonly def?: {
    readonly type?: string;
    readonly innerType?: unknown;
    readonly options?: readonly unknown[];
    readonly element?: unknown;
    readonly valueType?: unknown;
    readonly getter?: () => unknown;
    readonly shape?: Readonly<Record<string, unknown>>;
  };
}

function alternatives(schema: unknown): unknown[] {
  const { def } = schema as Inner;
  if (def?.innerType !== undefined) return alternatives(def.innerType);
  if (def?.type === 'lazy' && def.getter !== undefined) return alternatives(def.getter());
  if (def?.options !== undefined) return def.options.flatMap((option) => alternatives(option));
  return [schema];
}

function inside(schema: unknown, step: PropertyKey): unknown[] {
  const { def } = schema as Inner;
  const next = def?.element ?? def?.valueType ?? def?.shape?.[String(step)];
  return next === undefined ? [] : [next];
}

const shapeOf = (schema: unknown): Readonly<Record<string, unknown>> =>
  (schema as Inner).def?.shape ?? {};
