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

/** Opens the address in the person's browser; whether the system's opener took it. */
export function openInBrowser(
  address: string,
  opener: readonly [string, readonly string[]] = openerFor(address),
): Promise<boolean> {
  const [program, words] = opener;
  return new Promise((resolve) => {
    const child = spawn(program, words, { stdio: 'ignore', detached: true });
    // Some openers stay for as long as the browser does: having started is enough for them.
    const started = setTimeout(() => resolve(true), 3000);
    const end = (opened: boolean): void => {
      clearTimeout(started);
      resolve(opened);
    };
    child.once('error', () => end(false));
    child.once('exit', (code) => end(code === 0));
    child.unref();
  });
}
