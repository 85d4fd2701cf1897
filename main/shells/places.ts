import { homedir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The folder that holds resources/ and out/: of the sources, or of the package. */
function topFolder(from: string): string {
  // Built code lies in out/main or out/main/chunks, sources in main/shells: two folders below.
  const file = new URL(from.replace(/\/chunks\/[^/]*$/u, '/built.js'));
  return fileURLToPath(new URL('../../', file));
}

export interface Places {
  /** The window's built files. */
  readonly window: string;
  readonly preload: string;
  readonly demo: string;
  readonly icon: string;
  /** The icon as browsers ask for it. */
  readonly favicon: string;
}

/** Where the app's own parts lie. `from` is for tests. */
export function placesOfApp(from: string = import.meta.url): Places {
  const top = topFolder(from);
  return {
    window: join(top, 'out', 'renderer'),
    preload: join(top, 'out', 'preload', 'preload.cjs'),
    demo: join(top, 'resources', 'demo'),
    icon: join(top, 'resources', 'icon', 'icon.png'),
    favicon: join(top, 'resources', 'icon', 'icon.ico'),
  };
}

type Environment = Readonly<Record<string, string | undefined>>;

/** Where this person's own settings of the app are kept: the same folder as Electron's. */
export function settingsFolder(
  environment: Environment = process.env,
  platform: NodeJS.Platform = process.platform,
  home: string = homedir(),
): string {
  const name = 'Understory';
  if (platform === 'darwin') return join(home, 'Library', 'Application Support', name);
  if (platform === 'win32') {
    return join(environment['APPDATA'] ?? join(home, 'AppData', 'Roaming'), name);
  }
  const configured = environment['XDG_CONFIG_HOME'];
  // The base directory specification has relative paths ignored.
  return join(configured?.startsWith('/') ? configured : join(home, '.config'), name);
}

/** Where studies are kept unless a person says otherwise. */
export function studiesFolder(documents: string = join(homedir(), 'Documents')): string {
  return join(documents, 'Understory');
}
