import { compareCodeUnits } from '../../engine/numbers/index.ts';

/**
 * Transcript names for files, in the order given: the file's name without its ending; with it where
 * two would be the same; with a number where they still are, in the order of the files' hashes.
 */
export function transcriptNames(
  files: readonly { readonly name: string; readonly hash: string }[],
  taken: ReadonlySet<string>,
): string[] {
  const short = files.map(({ name }) => withoutEnding(name));
  const names = short.map((name, index) =>
    taken.has(name) || short.some((other, i) => i !== index && other === name)
      ? files[index].name
      : name,
  );
  const used = new Set(taken);
  const result = new Array<string>(files.length);
  const order = files
    .map((_, index) => index)
    .sort(
      (a, b) =>
        compareCodeUnits(names[a], names[b]) || compareCodeUnits(files[a].hash, files[b].hash),
    );
  for (const index of order) {
    let name = names[index];
    for (let count = 2; used.has(name); count++) name = `${names[index]} (${count})`;
    used.add(name);
    result[index] = name;
  }
  return result;
}

function withoutEnding(name: string): string {
  const short = name.replace(/\.[^./]+$/u, '');
  return short === '' || short.endsWith('/') ? name : short;
}
