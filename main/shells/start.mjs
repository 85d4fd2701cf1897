// `npm start`: opens the window, in Electron where it can be had, else in a browser.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { buildIfNeeded, top } from './build.mjs';
import { canBeFetched, electronBinary, failedToday, fetchElectron } from './electron-binary.mjs';
import { startOptions, startUsage } from './start-options.mjs';

const say = (text) => process.stdout.write(`${text}\n`);

async function start() {
  // npm sets the working directory to the package; paths are meant from where the person stands.
  const options = startOptions(process.argv.slice(2), process.env.INIT_CWD ?? process.cwd());
  if ('wrong' in options) {
    process.stderr.write(`${options.wrong}\n\n${startUsage}`);
    return 2;
  }
  if (options.help) {
    process.stdout.write(startUsage);
    return 0;
  }
  if (!buildIfNeeded()) return 1;

  const { hasDisplay, serve } = await import(
    pathToFileURL(join(top, 'out', 'main', 'loopback.js')).href
  );
  const display = hasDisplay();
  const without = options.browser ? null : await withoutElectron(display);
  if (without === 'stopped') return 0;
  if (without === undefined) {
    const code = await runElectron(options.study);
    if (code !== null) return code;
    say('Electron does not run on this machine, so Understory opens in a browser window.');
  } else if (without !== null) {
    say(without);
  }
  return serve({ study: options.study, open: options.open && display, port: options.port });
}

/** Why there is no Electron, in a sentence; undefined where it is ready to run; 'stopped' by Ctrl-C. */
async function withoutElectron(display) {
  if (!display) return 'There is no display here, so Understory waits for a browser.';
  if (process.getuid?.() === 0) {
    return 'The administrator’s account is not given Electron’s window, so Understory opens in a browser.';
  }
  if (electronBinary() !== null) return undefined;
  const cannot = 'Electron cannot be had here, so Understory opens in a browser window.';
  if (failedToday() || !canBeFetched()) return cannot;
  say('Setting up: fetching Electron, once (about 120 MB; the only step that uses the network) …');
  const fetched = await fetchElectron();
  if (fetched === 'stopped') return fetched;
  return fetched === 'there' ? undefined : cannot;
}

/** Electron's exit code, or null where it ended before its window was there. */
function runElectron(study) {
  return new Promise((resolve) => {
    let ready = false;
    const child = spawn(electronBinary(), [top, ...(study === null ? [] : [study])], {
      stdio: ['ignore', 'inherit', 'pipe', 'ipc'],
    });
    // What a program that cannot start has to say is for its makers; one plain sentence follows.
    child.stderr.on('data', (text) => ready && process.stderr.write(text));
    child.on('message', (message) => (ready ||= message === 'ready'));
    // The terminal sends Ctrl-C to both; Electron closes the study, and this waits for it.
    process.on('SIGINT', () => undefined);
    child.once('error', () => resolve(null));
    child.once('exit', (code) => resolve(ready ? (code ?? 0) : code === 0 ? 0 : null));
  });
}

process.exitCode = await start();
