/** Names that are known from outside, lower case, NFC, with straight apostrophes. */
export interface NameLists {
  readonly given: ReadonlySet<string>;
  readonly family: ReadonlySet<string>;
  /** Places of one word and of several ("port ellen"). */
  readonly places: ReadonlySet<string>;
  /** English words that are names as well ("will", "rose", "reading"). */
  readonly ordinary: ReadonlySet<string>;
}

/** A word as the lists have it, without an ending 's. */
export function nameKeyOf(word: string): string {
  return word
    .normalize('NFC')
    .replace(/[’ʼ‘]/gu, "'")
    .toLowerCase()
    .replace(/'s$|(?<=s)'$/u, '');
}
