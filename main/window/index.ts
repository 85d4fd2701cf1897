// What a shell needs: a session, and what it has to be told.
export { createSession } from './session.ts';
export type {
  CallContext,
  Handlers,
  RecentPaths,
  Session,
  Surroundings,
  SystemDialogs,
} from './session-types.ts';
