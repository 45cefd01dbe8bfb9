import { decodeBase64 } from '../base/base64.js';

/** The part of the WebAssembly interface used here; declared because no library of types of a platform is. */
interface WasmMemory {
  readonly buffer: ArrayBuffer;
  grow(pages: number): number;
}
interface WasmHost {
  readonly Module: new (bytes: Uint8Array) => object;
  readonly Instance: new (module: object, imports: object) => { readonly exports: Readonly<Record<string, unknown>> };
  readonly Memory: new (options: { readonly initial: number; readonly maximum: number }) => WasmMemory;
  validate(bytes: Uint8Array): boolean;
}
declare const WebAssembly: WasmHost | undefined;

/** Compiled kernels; code without state, made once. */
export interface CompiledKernels {
  /** A WebAssembly.Module. */
  readonly module: object;
}

/** Kernels with memory of their own: what one holder does to its instance no other sees. */
export interface KernelInstance<Exports> {
  readonly exports: Exports;
  /** At least this many bytes from now on; earlier views of the buffer are void after it. Throws RangeError beyond 4 GiB. */
  readonly reserve: (bytes: number) => ArrayBuffer;
  /** The memory as it is; ask again after every `reserve`. */
  readonly buffer: () => ArrayBuffer;
}

const PAGE = 65_536;
/** Pages a 32-bit address reaches. */
const MOST = 65_536;

/**
 * Compiles kernels; undefined where the host has no WebAssembly, or none with what they use, such as SIMD, or where it lets
 * none be compiled: pages may forbid it (Content Security Policy), and older browsers compile little of it on the page
 * itself. Then the plain twins serve.
 */
export function compileKernels(base64: string): CompiledKernels | undefined {
  if (typeof WebAssembly === 'undefined') return undefined;
  const bytes = decodeBase64(base64);
  if (!WebAssembly.validate(bytes)) return undefined;
  try {
    return { module: new WebAssembly.Module(bytes) };
  } catch {
    return undefined; // the bytes are sound, so the host does not want them
  }
}

/** A new instance with at least so many bytes of memory. Throws RangeError where the host cannot give them. */
export function instantiate<Exports>(compiled: CompiledKernels, bytes: number): KernelInstance<Exports> {
  if (typeof WebAssembly === 'undefined') throw new Error('instantiate: compiled without WebAssembly');
  const memory = new WebAssembly.Memory({ initial: Math.max(1, Math.ceil(bytes / PAGE)), maximum: MOST });
  const instance = new WebAssembly.Instance(compiled.module, { env: { memory, abort: fail } });
  return {
    exports: instance.exports as Exports, // the names and signatures are those of the kernel's source
    buffer: () => memory.buffer,
    reserve: (wanted) => {
      const missing = Math.ceil((wanted - memory.buffer.byteLength) / PAGE);
      if (missing > 0) memory.grow(missing);
      return memory.buffer;
    },
  };
}

function fail(): never {
  throw new Error('a kernel stopped');
}
