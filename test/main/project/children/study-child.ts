// A process of its own that opens a study. Built and started by child-process.ts.
import * as fs from 'node:fs';
import { openStudyFile } from '../../../../main/project/index.ts';
import { actNumbered } from './act-numbered.ts';

const [task, path = '', lockPlace] = process.argv.slice(2);

/** At once, so that nothing said is lost when this process is killed. */
function say(line: string): void {
  fs.writeSync(1, `${line}\n`);
}

const result = await openStudyFile(path, {
  readOnly: task === 'read',
  onSecondOpen: () => say('forward'),
  ...(lockPlace === 'folder' || lockPlace === 'name' ? { lockPlace } : {}),
});
say(result.ok ? 'open' : result.code);

if (result.ok && task === 'append') {
  for (let number = result.value.nextSequence; ;) {
    const appended = result.value.appendAll(actNumbered(number));
    say(appended.ok ? `saved ${result.value.nextSequence - 1}` : appended.code);
    if (!appended.ok) break;
    number = result.value.nextSequence;
    // Lets the lock answer.
    await new Promise((resolve) => setImmediate(resolve));
  }
}
process.stdin.on('end', () => {
  if (result.ok) result.value.close();
});
process.stdin.resume();
