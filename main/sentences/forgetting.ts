import type { Mention } from '../forgetting/mentions.ts';
import type { Exported } from '../../engine/study/index.ts';

/** What erasing cannot reach; said before it, in the window and on the command line. */
export const beyondReach =
  'Only this file and the backups that Understory made of it are reached: versions kept by a ' +
  'synchronised folder, copies elsewhere, reports that were saved or sent, and what a drive still ' +
  'holds of deleted files are not.';

export const noWayBack = 'This cannot be undone, and nothing before it can be undone afterwards.';

export function mentionInWords({ where, on, count }: Mention): string {
  const times = count === 1 ? '' : ` (${count} times)`;
  switch (where) {
    case 'name of the study':
      return `the name of the study`;
    case 'the trail':
      return `${count} earlier ${count === 1 ? 'decision' : 'decisions'} of the trail`;
    case 'transcript':
      return `what is said in ${on}${times}`;
    case 'name of a transcript':
    case 'name of a participant':
    case 'name of a theme':
    case 'name of a draw':
    case 'name of a fit':
    case 'file name of a report':
      return `the ${where} ${on}`;
    case 'field note':
      return `the field note ${on}${times}`;
    case 'question of the guide':
      return `a question of the guide, “${on}”`;
    case 'setting':
      return `a setting, ${on}${times}`;
    case 'heading':
    case 'seed word':
    case 'word shut out':
    case 'stand-in':
      return `a ${where} of ${on}${times}`;
    case 'memo':
    case 'memo on a coding':
      return `a ${where === 'memo' ? 'memo' : 'memo on a coding'} in ${on}${times}`;
    default:
      return `the ${where} of ${on}${times}`;
  }
}

export function exportedInWords({ fileName, at }: Exported): string {
  return `${fileName}, ${at.slice(0, 10)}`;
}

/** Why nothing was erased. */
export const forgettingSentences = {
  stopped: 'The fit was stopped, so nothing was erased; begin again when you like.',
  'cannot be taken apart':
    'What would be left does not follow from one another any more, so nothing was erased; leave one of the names out, then try again.',
  'nothing to seal':
    'No transcript was reworded and no name has a stand-in, so there are no originals to seal; put stand-ins in place first.',
} as const;
