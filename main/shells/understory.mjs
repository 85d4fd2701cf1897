// `npm run understory -- …`: the command line, built first where needed.
import { buildIfNeeded, top } from './build.mjs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

if (buildIfNeeded()) {
  const { run } = await import(pathToFileURL(join(top, 'out', 'main', 'command.js')).href);
  // npm sets the working directory to the package; paths are meant from where the person stands.
  process.exitCode = await run(process.argv.slice(2), process.env.INIT_CWD ?? process.cwd());
} else {
  process.exitCode = 1;
}
