import { execFileSync } from 'node:child_process';
import {
  chmodSync,
  createReadStream,
  createWriteStream,
  existsSync,
  mkdirSync,
  renameSync,
} from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { pipeline } from 'node:stream/promises';
import { createBrotliDecompress } from 'node:zlib';
import { chromium, type Browser } from 'playwright-core';

const own = '/usr/bin/chromium';

/**
 * A headless Chromium: the machine's own where there is one, else the one inside the npm package,
 * unpacked once. The package's launcher is not used: its flags switch web security off.
 */
export async function launchChromium(): Promise<Browser> {
  const options = existsSync(own) ? { executablePath: own } : await unpackedChromium();
  return chromium.launch({
    ...options,
    args: [
      // A container's root has no sandbox to go into; nobody else's pages are opened here.
      ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
      '--disable-gpu',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      '--disable-quic',
      '--no-first-run',
      '--force-color-profile=srgb',
    ],
  });
}

async function unpackedChromium() {
  const packed = join(
    dirname(createRequire(import.meta.url).resolve('@sparticuz/chromium')),
    '..',
    '..',
    'bin',
  );
  const cache = join(import.meta.dirname, '..', '..', 'node_modules', '.cache', 'test-chromium');
  const executablePath = join(cache, 'chromium');
  mkdirSync(cache, { recursive: true });
  if (!existsSync(executablePath)) {
    for (const archive of ['al2023', 'fonts', 'swiftshader']) {
      const tar = join(cache, `${archive}.tar`);
      await unbrotli(join(packed, `${archive}.tar.br`), tar);
      execFileSync('tar', ['-xf', tar, '-C', cache]);
    }
    const part = `${executablePath}.part`;
    await unbrotli(join(packed, 'chromium.br'), part);
    chmodSync(part, 0o755);
    renameSync(part, executablePath);
  }
  return {
    executablePath,
    env: {
      ...process.env,
      LD_LIBRARY_PATH: [join(cache, 'lib'), cache].join(':'),
      FONTCONFIG_PATH: cache,
      FONTCONFIG_FILE: join(cache, 'fonts.conf'),
    } as Record<string, string>,
  };
}

async function unbrotli(from: string, to: string): Promise<void> {
  await pipeline(createReadStream(from), createBrotliDecompress(), createWriteStream(to));
}
