const reserved = /^(?:con|prn|aux|nul|com\d|lpt\d)$/iu;

/** What a drive of any system takes as a file's name, without its ending. */
export function safeFileName(name: string): string {
  const plain = name
    .normalize('NFC')

    .replace(/[\u0000-\u001f\u007f<>:"/\\|?*]+/gu, ' ')
    .replace(/\s+/gu, ' ')
    .trim()
    .replace(/^\.+|[. ]+$/gu, '');
  // Drives count bytes or code units; 80 characters stay below the limit of each.
  const short = [...plain].slice(0, 80).join('').trim();
  if (short === '') return 'Study';
  return reserved.test(short) ? `${short} study` : short;
}
