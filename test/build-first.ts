import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

/**
 * Workers run from out/, so the sources are built before any test. Where they cannot be, the builder
 * says why, and the tests that need what it builds fail.
 */
export default async function buildFirst(): Promise<void> {
  const shells = join(dirname(fileURLToPath(import.meta.url)), '..', 'main', 'shells');
  const builder = (await import(pathToFileURL(join(shells, 'build.mjs')).href)) as {
    buildIfNeeded: (options: { announce: boolean }) => boolean;
  };
  builder.buildIfNeeded({ announce: false });
}
