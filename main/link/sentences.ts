import type { Refused } from '../api.ts';

/** Refusals of the link itself; what the desk refuses has its own sentences. */
export const refusals = {
  unknownMethod: {
    refused:
      'The window asked for something that this version of Understory does not know. Restart Understory.',
    code: 'unknown method',
  },
  notAuthorised: {
    refused: 'The request did not come from Understory’s own window, so it was not answered.',
    code: 'not authorised',
  },
  malformed: (where: string): Refused => ({
    refused: `The window sent something that cannot be right${where === '' ? '' : ` (${where})`}, so nothing was changed. Check what was typed, or make it shorter.`,
    code: 'malformed request',
  }),
  tooLarge: {
    refused: 'A file is larger than 200 MB, more than can be taken in. Divide it.',
    code: 'too large',
  },
  tooMany: {
    refused: 'Too much is being asked at the same time. Wait a moment, then try again.',
    code: 'too many requests',
  },
  cancelled: { refused: 'Stopped. The study is as it was before.', code: 'cancelled' },
  fault: {
    refused:
      'This is a fault in Understory, not in what you did. The study on the drive holds everything decided so far. Try again; if it happens again, close Understory and open the study anew.',
    code: 'fault',
  },
} as const;
