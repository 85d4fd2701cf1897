// What stands after `npm start --`. Plain JavaScript, because it is read before anything is built.
import { resolve } from 'node:path';

export const startUsage = `npm start -- [study.understory] [--no-open] [--port N] [--browser]
  study.understory  opens that study
  --browser         in a browser window, even where Electron could be used
  --no-open         prints the address instead of opening a browser
  --port N          a port of your choice for the browser window
`;

export function startOptions(words, folder) {
  const options = { study: null, open: true, port: 0, browser: false, help: false };
  for (let at = 0; at < words.length; at++) {
    const word = words[at];
    if (word === '--help' || word === '-h') options.help = true;
    else if (word === '--browser') options.browser = true;
    else if (word === '--no-open') options.open = false;
    else if (word === '--port') {
      const port = Number(words[++at]);
      if (!Number.isInteger(port) || port < 0 || port > 65_535) {
        return { wrong: '--port takes a number from 0 to 65535.' };
      }
      options.port = port;
    } else if (word.startsWith('-')) return { wrong: `There is no option “${word}”.` };
    else if (options.study !== null) return { wrong: 'One study at a time, please.' };
    else options.study = resolve(folder, word);
  }
  // An address and a port are only of use to a browser.
  if (!options.open || options.port !== 0) options.browser = true;
  return options;
}
