/** A kernel's source, compiled and inlined by the build (.config/assemblyscript.ts). */
declare module '*.as.ts?wasm' {
  const bytes: Uint8Array;
  export default bytes;
}
