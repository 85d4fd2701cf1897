// What `npm run dist` packages. Checked against the builder's own schema in test/packaging.
import { readdirSync, readFileSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const top = join(dirname(fileURLToPath(import.meta.url)), '..');

/**
 * A worker cannot be started from inside the archive, so each lies beside it, with the parts that it
 * imports. Everything else stays inside, where its integrity is checked.
 *
 * @param {string} folder where the built files are
 * @returns {string[]} their names
 */
export function filesOfWorkers(folder = join(top, 'out', 'main')) {
  /** @type {Set<string>} */
  const found = new Set();
  const take = (name) => {
    if (found.has(name)) return;
    found.add(name);
    const code = readFileSync(join(folder, name), 'utf8');
    for (const [, part] of code.matchAll(/(?:from|import)\s*\(?\s*["']\.\/([^"']+)["']/gu))
      take(part);
  };
  try {
    readdirSync(folder)
      .filter((name) => name.endsWith('.worker.js'))
      .forEach(take);
  } catch {
    // Not built yet: the builder says so itself.
  }
  return [...found].sort();
}

/** Bytes of the app's own part: all that is not Electron. */
export function ownSize(resources) {
  const bytes = (path) => {
    const stats = statSync(path, { throwIfNoEntry: false });
    if (stats === undefined) return 0;
    if (!stats.isDirectory()) return stats.size;
    return readdirSync(path).reduce((sum, name) => sum + bytes(join(path, name)), 0);
  };
  return bytes(join(resources, 'app.asar')) + bytes(join(resources, 'app.asar.unpacked'));
}

async function printOwnSize({ appOutDir, electronPlatformName, packager }) {
  const resources =
    electronPlatformName === 'darwin'
      ? join(appOutDir, `${packager.appInfo.productFilename}.app`, 'Contents', 'Resources')
      : join(appOutDir, 'resources');
  const megabytes = (ownSize(resources) / 1e6).toFixed(1);
  process.stdout.write(`  • Understory's own part: ${megabytes} MB (the rest is Electron)\n`);
}

/** @type {import('electron-builder').Configuration} */
export default {
  appId: 'app.understory',
  productName: 'Understory',
  copyright: 'The Understory developers, MIT licence',
  directories: { output: 'dist', buildResources: 'resources/icon' },
  // All packages are bundled into out/: not one is taken along as it is.
  files: [
    'out/main/**',
    'out/preload/**',
    'out/renderer/**',
    'resources/demo/**',
    'resources/words/README.md',
    'resources/icon/icon.{png,ico}',
    'package.json',
    '!node_modules',
    '!**/*.{ts,map}',
  ],
  // Beside a worker, package.json says that it is an ES module.
  asarUnpack: ['package.json', ...filesOfWorkers().map((name) => `out/main/${name}`)],
  asar: true,
  disableAsarIntegrity: false,
  npmRebuild: false,
  nodeGypRebuild: false,
  // Nothing updates itself: the app uses no network.
  publish: null,
  removePackageScripts: true,
  afterPack: printOwnSize,
  electronFuses: {
    // Not usable as a Node that runs whatever it is given.
    runAsNode: false,
    enableNodeOptionsEnvironmentVariable: false,
    enableNodeCliInspectArguments: false,
    enableCookieEncryption: true,
    // Only the code that was packaged, unchanged.
    enableEmbeddedAsarIntegrityValidation: true,
    onlyLoadAppFromAsar: true,
    loadBrowserProcessSpecificV8Snapshot: false,
    // The window comes from app://, and file:// is no more to us than any other address.
    grantFileProtocolExtraPrivileges: false,
  },
  fileAssociations: [
    {
      ext: 'understory',
      name: 'Understory study',
      description: 'Understory study',
      mimeType: 'application/x-understory',
      role: 'Editor',
      icon: 'resources/icon/icon',
      isPackage: false,
    },
  ],
  win: { target: ['nsis', 'zip'], icon: 'resources/icon/icon.ico' },
  nsis: { oneClick: false, perMachine: false, allowToChangeInstallationDirectory: true },
  mac: {
    target: ['dmg', 'zip'],
    icon: 'resources/icon/icon.icns',
    category: 'public.app-category.productivity',
    hardenedRuntime: true,
    // What Electron's own Info.plist would ask for and this app never does.
    extendInfo: {
      NSCameraUsageDescription: null,
      NSMicrophoneUsageDescription: null,
      NSBluetoothAlwaysUsageDescription: null,
      NSBluetoothPeripheralUsageDescription: null,
    },
  },
  linux: {
    target: ['AppImage', 'tar.gz'],
    icon: 'resources/icon/icon.png',
    category: 'Office',
    synopsis: 'Theme and code interview transcripts offline',
    maintainer: 'The Understory developers',
  },
};
