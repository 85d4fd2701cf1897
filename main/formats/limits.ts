/** How much one file may bring: far above any transcript, far below what would exhaust a machine. */
export const mostFileMegabytes = 200;

/** The text of one file, unpacked. An hour of talk is a tenth of one. */
export const mostTextMegabytes = 50;

export const mostTextBytes = mostTextMegabytes * 1_000_000;

/** Elements or groups inside each other. */
export const deepest = 2_000;

export function tooLarge(
  bytes: number | null,
  limit = mostTextMegabytes,
): {
  readonly ok: false;
  readonly code: 'too large';
  readonly megabytes: number | null;
  readonly limit: number;
} {
  const megabytes = bytes === null ? null : Math.ceil(bytes / 1_000_000);
  return { ok: false, code: 'too large', megabytes, limit };
}
