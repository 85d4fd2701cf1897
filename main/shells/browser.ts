import { spawn } from 'node:child_process';

type Environment = Readonly<Record<string, string | undefined>>;

/** Whether a window could be shown at all. */
export function hasDisplay(
  environment: Environment = process.env,
  platform: NodeJS.Platform = process.platform,
): boolean {
  if (platform === 'win32' || platform === 'darwin') return true;
  return Boolean(environment['DISPLAY'] ?? '') || Boolean(environment['WAYLAND_DISPLAY'] ?? '');
}

/** The program that opens an address, and what it is given. */
export function openerFor(
  address: string,
  platform: NodeJS.Platform = process.platform,
): readonly [string, readonly string[]] {
  if (platform === 'darwin') return ['open', [address]];
  // Not `cmd /c start`: a shell would take parts of an address for its own.
  if (platform === 'win32') return ['rundll32', ['url.dll,FileProtocolHandler', address]];
  return ['xdg-open', [address]];
}

/**
 * Hands the address to the person's browser. Settles when the system's opener is known to have
 * failed, and only then: one that ends well may still have shown nothing, so whether a window came is
 * for the shell to see.
 */
export function openerFailed(
  address: string,
  opener: readonly [string, readonly string[]] = openerFor(address),
): Promise<void> {
  const [program, words] = opener;
  return new Promise((resolve) => {
    const child = spawn(program, words, { stdio: 'ignore', detached: true });
    child.once('error', () => resolve());
    child.once('exit', (code) => {
      if (code !== 0) resolve();
    });
    child.unref();
  });
}
