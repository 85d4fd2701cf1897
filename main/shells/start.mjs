// `npm start`: until there is a window, what the command line can do.
import { buildIfNeeded, top } from './build.mjs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

if (buildIfNeeded()) {
  const { run } = await import(pathToFileURL(join(top, 'out', 'main', 'command.js')).href);
  process.exitCode = await run(['--help'], process.cwd());
} else {
  process.exitCode = 1;
}
