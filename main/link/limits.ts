/** How much one call may bring: far above real work, far below what would exhaust a machine. */
export const limits = {
  /** Bytes of one message over the loopback shell. */
  messageBytes: 256 * 1024 * 1024,
  /** Bytes of one file. */
  fileBytes: 200 * 1024 * 1024,
  /** Files in one call. */
  files: 2000,
  /** Code units of a name, a word, an id, a label. */
  name: 1000,
  /** Code units of a password. */
  password: 4096,
  /** Code units of a path. */
  path: 32_768,
  /** Code units of a memo or a part of a definition. */
  text: 1_000_000,
  /** Entries of a list of ids, words or settings. */
  list: 10_000,
  /** Calls of one window that run at the same time. */
  running: 256,
} as const;
