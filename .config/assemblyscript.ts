import { createHash } from 'node:crypto';
import { mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import path from 'node:path';
import asc from 'assemblyscript/asc';
import type { Plugin } from 'vite';

const suffix = '.as.ts?wasm';
const flags = [
  '--optimizeLevel=3',
  '--shrinkLevel=0',
  '--noAssert',
  '--runtime=stub',
  '--importMemory',
  '--memoryBase=1024',
  '--enable=simd',
];

/**
 * Compiles `import bytes from './x.as.ts?wasm'`: x.as.ts by AssemblyScript, its WebAssembly inlined
 * as a Uint8Array, so that no file is read when the program runs. Compiled files are kept under
 * node_modules/.cache by the hash of source, flags and compiler.
 */
export function assemblyscript(): Plugin {
  return {
    name: 'assemblyscript',
    enforce: 'pre',
    resolveId(source, importer) {
      if (!source.endsWith(suffix) || importer === undefined) return null;
      return path.resolve(path.dirname(importer.split('?')[0]), source);
    },
    async load(id) {
      if (!id.endsWith(suffix)) return null;
      const file = id.slice(0, -'?wasm'.length);
      this.addWatchFile(file);
      const bytes = await compiled(file);
      return `export default Uint8Array.of(${bytes.join(',')});`;
    },
  };
}

async function compiled(file: string): Promise<Uint8Array> {
  const source = await readFile(file, 'utf8');
  const require = createRequire(import.meta.url);
  const { version } = require('assemblyscript/package.json') as { version: string };
  const key = createHash('sha256')
    .update([version, ...flags, source].join('\n'))
    .digest('hex');
  const cache = path.resolve(import.meta.dirname, '../node_modules/.cache/assemblyscript');
  const kept = path.join(cache, `${key}.wasm`);
  try {
    return await readFile(kept);
  } catch {
    // Not compiled yet.
  }
  const bytes = await compile(path.basename(file), source);
  await mkdir(cache, { recursive: true });
  // Two builds may get here at once: each writes its own file, and the renames put equal ones.
  const own = `${kept}.${process.pid}`;
  await writeFile(own, bytes);
  await rename(own, kept);
  return bytes;
}

async function compile(name: string, source: string): Promise<Uint8Array> {
  let bytes: Uint8Array | undefined;
  const { error, stderr } = await asc.main([name, '--outFile=out.wasm', ...flags], {
    readFile: (asked: string) => (asked === name ? source : null),
    writeFile: (_: string, contents: Uint8Array | string) => {
      if (typeof contents !== 'string') bytes = contents;
    },
    listFiles: () => [],
  });
  if (error || bytes === undefined) {
    throw new Error(`${name} does not compile:\n${stderr.toString()}`);
  }
  return bytes;
}
