import { sep } from 'node:path';

/** Whether an absolute path is a folder or lies in it. */
export function isInside(path: string, folder: string): boolean {
  return path === folder || path.startsWith(folder.endsWith(sep) ? folder : `${folder}${sep}`);
}
