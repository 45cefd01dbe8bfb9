import { setFlagsFromString } from 'node:v8';

// Node 20 has the fused products of WebAssembly's relaxed SIMD, since finished as a standard, behind a flag; later ones have
// them without. To be imported before the library, which looks for them once, when it is loaded.
if (process.versions.node.startsWith('20.')) setFlagsFromString('--experimental-wasm-relaxed-simd');
