import { emptyDefinition, type Coding, type Edit, type Theme } from '../../engine/study/index.ts';
import type { Api, Refused } from '../api.ts';
import { give, isRefused, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import { selectionIn } from './selection.ts';
import type { Handlers } from './session-types.ts';

/** As it is recorded with the codings of a theme that was made from marked passages. */
const drawnBy = 'marked for a new theme';

export function themeFromPassages(room: Room): Pick<Handlers, 'addThemeFromPassages'> {
  return {
    addThemeFromPassages: room.look(async (open, takes: Api['addThemeFromPassages']['takes']) => {
      const added = add(open, takes);
      if (isRefused(added)) return added;
      const after = await room.afterwards(open);
      return isRefused(after) ? after : give({ overview: after.value, theme: added.theme });
    }),
  };
}

/** The theme and the codings that it starts from, as one decision; the next fit takes them up. */
function add(
  open: OpenStudy,
  { name, passages }: Api['addThemeFromPassages']['takes'],
): { readonly theme: string } | Refused {
  if (passages.length === 0) return refuse('no passages marked');
  const { study, desk, reader, now } = open;
  const theme: Theme = {
    id: desk.context.mintId('theme'),
    name: name.trim(),
    origin: 'asked for',
    definition: emptyDefinition,
    version: 1,
    pinned: false,
    setAside: false,
    mergedInto: null,
    seeds: [],
    shutOut: [],
  };
  const made = new Map<string, Edit>();
  for (const { transcript, ...marked } of passages) {
    const selection = selectionIn(open, transcript, marked);
    if (isRefused(selection)) return selection;
    const { span } = selection;
    const coding: Coding = {
      id: desk.context.mintId('coding'),
      transcript,
      span,
      theme: theme.id,
      standing: 'by hand',
      under: {
        reader: reader.id,
        at: desk.context.now(),
        drawnBy,
        seenSuggestion: now.fitted !== null,
        fit: study.fit,
      },
      strength: null,
      codebookVersion: theme.version,
      memo: '',
    };
    made.set(`${transcript} ${span.start} ${span.end}`, { kind: 'codingMade', coding });
  }
  const cleared = [...made.values()].flatMap((edit) =>
    edit.kind === 'codingMade' ? nonesOn(open, edit.coding) : [],
  );
  const refused = open.decide([
    { kind: 'themeAdded', theme },
    ...new Map(cleared.map((edit) => [edit.none.id, edit])).values(),
    ...made.values(),
  ]);
  return refused ?? { theme: theme.id };
}

/** "No theme applies" does not stand beside a theme. */
function nonesOn(
  { study }: OpenStudy,
  { transcript, span }: Coding,
): Extract<Edit, { kind: 'noneCleared' }>[] {
  return [...(study.nones.get(transcript)?.values() ?? [])]
    .filter((none) => none.span.start < span.end && span.start < none.span.end)
    .map((none) => ({ kind: 'noneCleared', none }));
}
