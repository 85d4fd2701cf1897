/** The path of Electron's program in its package's folder, or null. */
export function electronBinary(from?: string): string | null;
/** Whether fetching was tried in vain today. */
export function failedToday(note?: string): boolean;
export function canBeFetched(into?: string): boolean;
export function fetchElectron(options?: {
  readonly from?: string;
  readonly note?: string;
  /** Milliseconds until it is given up. */
  readonly ms?: number;
}): Promise<'there' | 'not there' | 'stopped'>;
