/** What compacting did, in sentences; sizes in bytes. */
export function compactedInWords(
  { before, after }: { readonly before: number; readonly after: number },
  records: number,
): string[] {
  if (records === 0) return [`Nothing in the study can go; it has ${grouped(after)} bytes.`];
  const lost = records === 1 ? 'One record' : `${records} records`;
  return [
    `Before: ${grouped(before)} bytes; after: ${grouped(after)} bytes.`,
    `${lost} that nothing asks for any more lost ${records === 1 ? 'its' : 'their'} content; every decision stays in the trail.`,
  ];
}

/** That compacting leaves backups alone; nothing where there are none. */
export function backupsBesideCompact(sizes: readonly number[]): string[] {
  if (sizes.length === 0) return [];
  const bytes = grouped(sizes.reduce((sum, size) => sum + size, 0));
  return sizes.length === 1
    ? [`One backup from before stays as it is, ${bytes} bytes.`]
    : [`${sizes.length} backups from before stay as they are, ${bytes} bytes together.`];
}

function grouped(whole: number): string {
  return String(whole).replace(/\B(?=(\d{3})+$)/gu, ',');
}
