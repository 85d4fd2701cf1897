import type { Events, Method } from '../api.ts';

/** Names of the channels between the preload and the main process: derived, never chosen by a window. */
export const channelOf = (method: Method): string => `understory/call/${method}`;
export const cancelChannel = 'understory/cancel';
export const progressChannel = 'understory/progress';
export const eventChannel = 'understory/event';

/** What a window may be told of. */
export const eventNames = [
  'changed',
  'closed',
  'refining',
  'caution',
  'locked',
  'command',
] as const satisfies (keyof Events)[];

/** The scheme and host of the window's files, and the only origin that is answered. */
export const appScheme = 'app';
export const appHost = 'understory';
export const appOrigin = `${appScheme}://${appHost}`;
