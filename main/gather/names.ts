import { compareCodeUnits } from '../../engine/numbers/index.ts';

/**
 * Transcript names for files, in the order given: the file's name without its ending; with it where
 * two would be the same; with a number where they still are, in the order of the files' hashes.
 * Names that differ only in capitals count as the same, since many drives take them so.
 */
export function transcriptNames(
  files: readonly { readonly name: string; readonly hash: string }[],
  taken: ReadonlySet<string>,
): string[] {
  const short = files.map(({ name }) => withoutEnding(name));
  const used = new Set([...taken].map(inLowerCase));
  const names = short.map((name, index) =>
    used.has(inLowerCase(name)) ||
    short.some((other, i) => i !== index && inLowerCase(other) === inLowerCase(name))
      ? files[index].name
      : name,
  );
  const result = new Array<string>(files.length);
  const order = files
    .map((_, index) => index)
    .sort(
      (a, b) =>
        compareCodeUnits(names[a], names[b]) || compareCodeUnits(files[a].hash, files[b].hash),
    );
  for (const index of order) {
    let name = names[index];
    for (let count = 2; used.has(inLowerCase(name)); count++) name = `${names[index]} (${count})`;
    used.add(inLowerCase(name));
    result[index] = name;
  }
  return result;
}

function inLowerCase(name: string): string {
  return name.toLowerCase();
}

function withoutEnding(name: string): string {
  const short = name.replace(/\.[^./]+$/u, '');
  return short === '' || short.endsWith('/') ? name : short;
}
