import { chmod, mkdir, readFile, writeFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { join } from 'node:path';

/** What each fuse stands for, in the order of the wire (@electron/fuses, FuseV1Options). */
const fuseNames = [
  'runAsNode',
  'enableCookieEncryption',
  'enableNodeOptionsEnvironmentVariable',
  'enableNodeCliInspectArguments',
  'enableEmbeddedAsarIntegrityValidation',
  'onlyLoadAppFromAsar',
  'loadBrowserProcessSpecificV8Snapshot',
  'grantFileProtocolExtraPrivileges',
];

/** Which fuses of a program are on. */
export async function fusesOf(program: string): Promise<Record<string, boolean>> {
  const bytes = await readFile(program);
  const wire = bytes.indexOf(sentinel) + sentinel.length + 2;
  return Object.fromEntries(fuseNames.map((name, at) => [name, bytes[wire + at] === 0x31]));
}

/** Marks where an Electron program keeps its fuses (@electron/fuses, constants). */
const sentinel = 'dL7pKGdnNz796PbbjQWNKmHXBZaB9tsX';

/** The version of Electron that the app is made for. */
export const electronVersion = (
  createRequire(import.meta.url)('electron/package.json') as { readonly version: string }
).version;

/**
 * The tree of an unpacked Electron for Linux, with the files that a packager looks for and a program
 * that holds nothing but its fuses: version 1, nine of them, all as Electron ships them.
 */
export async function standInForElectron(folder: string): Promise<void> {
  await mkdir(join(folder, 'resources'), { recursive: true });
  await mkdir(join(folder, 'locales'));
  const fuses = Buffer.concat([
    Buffer.from(`stand-in ${sentinel}`, 'latin1'),
    Buffer.of(1, 9),
    Buffer.from('101100010', 'latin1'),
    Buffer.from(' end', 'latin1'),
  ]);
  await writeFile(join(folder, 'electron'), fuses);
  await chmod(join(folder, 'electron'), 0o755);
  await writeFile(join(folder, 'version'), electronVersion);
  await writeFile(join(folder, 'LICENSE'), 'Electron');
  await writeFile(join(folder, 'LICENSES.chromium.html'), 'Chromium');
  await writeFile(join(folder, 'locales', 'en-US.pak'), '');
  await writeFile(join(folder, 'chrome-sandbox'), '');
}
