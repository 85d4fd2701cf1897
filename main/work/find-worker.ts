import { fileURLToPath } from 'node:url';

/**
 * The built file of a worker. From source (tests) it lies in out/main, which the test run builds
 * first; when built, beside this file. Inside a package workers are unpacked from the archive,
 * because a worker cannot be started from within it.
 */
export function workerFile(name: string, from: string = import.meta.url): URL {
  if (from.endsWith('.ts')) return new URL(`../../out/main/${name}.js`, from);
  const beside = new URL(`./${name}.js`, from.replace(/\/chunks\/[^/]*$/u, '/'));
  return new URL(beside.href.replace(/app\.asar\//u, 'app.asar.unpacked/'));
}

export function workerPath(name: string): string {
  return fileURLToPath(workerFile(name));
}
