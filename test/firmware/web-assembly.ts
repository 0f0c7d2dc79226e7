/** The part of the WebAssembly interface that the tests use, typed: it is not in TypeScript's es2023. */

/** A compiled module: opaque. */
export type WasmModule = object;

export interface WasmMemory {
  readonly buffer: ArrayBuffer;
  grow(pages: number): number;
}

type WasmImports = Record<string, Record<string, (...args: number[]) => number>>;

interface WebAssemblyNamespace {
  readonly Module: new (bytes: Uint8Array) => WasmModule;
  readonly Instance: new (module: WasmModule, imports?: WasmImports) => { exports: unknown };
}

export const wasm = (globalThis as unknown as { WebAssembly: WebAssemblyNamespace }).WebAssembly;
