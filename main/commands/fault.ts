import { StudyFileFault } from '../project/index.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { Stop, type ExitCode } from './terminal.ts';

/** What is said when a command ends by an error, and its exit code. */
export function endingOf(error: unknown): {
  readonly sentence: string;
  readonly exitCode: ExitCode;
} {
  if (error instanceof Stop) return { sentence: error.message, exitCode: error.exitCode };
  if (error instanceof StudyFileFault) {
    return { sentence: sentenceFor(error.failure), exitCode: 1 };
  }
  return { sentence: faultSentence(error), exitCode: 1 };
}

/**
 * One sentence about an error that nobody foresaw: its message and where it arose. Quoted parts of
 * the message are left out, since they could be somebody's words.
 */
function faultSentence(error: unknown): string {
  const { name, message, stack = '' } = error instanceof Error ? error : new Error(String(error));
  const what = message
    .split('\n')[0]
    .replace(/(["“‘'`]).*(["”’'`])/u, '$1…$2')
    .replace(/\.$/u, '')
    .slice(0, 200);
  const frame = stack
    .split('\n')
    .map((line) => /([^\s()/\\]+\.[cm]?[jt]s):(\d+):\d+\)?$/u.exec(line))
    .find((found) => found !== null);
  const where = !frame ? '' : `, at ${frame[1]} line ${frame[2]}`;
  return (
    `This is a fault in Understory and not in your files (${name}: ${what}${where}); ` +
    'please report it with this line, which holds nothing of any transcript.'
  );
}
