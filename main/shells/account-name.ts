import { userInfo } from 'node:os';

/** The account's name: what a reader is called until they type a name. */
export function accountName(): string {
  try {
    return userInfo().username;
  } catch {
    return 'reader';
  }
}
