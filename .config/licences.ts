import { readdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import type { Plugin } from 'vite';

interface Package {
  readonly name: string;
  readonly version: string;
  readonly licence: string;
  readonly text: string | null;
}

/** Folders of the packages that went into any of the builds of this run. */
const bundled = new Set<string>();

/** Compiled into what is bundled, though no module of theirs is. */
const always = ['assemblyscript'];

/** Notes the packages that a build takes in. Belongs into every build. */
export function noteLicences(): Plugin {
  return {
    name: 'note-licences',
    generateBundle(_options, bundle) {
      for (const id of this.getModuleIds()) note(id);
      for (const part of Object.values(bundle)) {
        if (part.type === 'chunk') Object.keys(part.modules).forEach(note);
      }
    },
  };
}

/** Writes licences.txt with the terms of all packages noted so far. Belongs into the last build. */
export function writeLicences(): Plugin {
  return {
    name: 'write-licences',
    generateBundle() {
      const { resolve } = createRequire(import.meta.url);
      for (const name of always) bundled.add(dirname(resolve(`${name}/package.json`)));
      this.emitFile({ type: 'asset', fileName: 'licences.txt', source: licences() });
    },
  };
}

function note(id: string): void {
  const found = /^(.*[\\/]node_modules[\\/](?:@[^\\/]+[\\/])?[^\\/]+)[\\/]/u.exec(
    id.replace(/^\0/u, ''),
  );
  if (found !== null) bundled.add(found[1]);
}

function licences(): string {
  const packages = [...bundled]
    .map(read)
    .filter((found) => found !== null)
    .sort((a, b) => (a.name < b.name ? -1 : a.name > b.name ? 1 : 0));
  const parts = packages.map(({ name, version, licence, text }) =>
    [`${name} ${version} (${licence})`, '', text ?? 'The package holds no text of them.'].join(
      '\n',
    ),
  );
  const head =
    'Understory is made with these packages. Each is used under its own terms, which follow.\nThe word lists and their terms are described in resources/words/README.md.';
  return `${[head, ...parts].join(`\n\n${'-'.repeat(80)}\n\n`)}\n`;
}

function read(folder: string): Package | null {
  try {
    const { name, version, license } = JSON.parse(
      readFileSync(join(folder, 'package.json'), 'utf8'),
    ) as { name: string; version: string; license?: string };
    const own = textOf(folder, /^(?:licen[cs]e|copying|notice)/iu);
    const inReadme = /^#+\s*licen[cs]e[\s\S]*/imu.exec(textOf(folder, /^readme/iu))?.[0] ?? '';
    const licence = license ?? /\bMIT License\b/u.exec(own)?.[0] ?? 'see below';
    return { name, version, licence, text: own || inReadme.trim() || null };
  } catch {
    return null;
  }
}

/** The texts of a folder's files of such a name, one after the other. */
function textOf(folder: string, name: RegExp): string {
  return readdirSync(folder)
    .filter((file) => name.test(file))
    .sort()
    .map((file) => readFileSync(join(folder, file), 'utf8').trim())
    .join('\n\n');
}
