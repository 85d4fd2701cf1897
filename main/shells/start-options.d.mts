export const startUsage: string;
export interface StartOptions {
  readonly study: string | null;
  readonly open: boolean;
  readonly port: number;
  readonly browser: boolean;
  readonly help: boolean;
}
/** `folder`: where paths are meant from. */
export function startOptions(
  words: readonly string[],
  folder: string,
): StartOptions | { readonly wrong: string };
