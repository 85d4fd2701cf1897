import { settingsOf } from '../../engine/themes/index.ts';
import type { Api, CodebookOffer } from '../api.ts';
import { codebookEdits, namesTaken, readCodebook, type CodebookEntry } from '../gather/codebook.ts';
import { wordLists } from '../word-lists.ts';
import { give, isRefused, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';
import { formFor } from './theme-words.ts';

export function codebookHandlers(room: Room): Pick<Handlers, 'readCodebook' | 'addCodebook'> {
  return {
    readCodebook: room.look<Api['readCodebook']['takes'], CodebookOffer>(
      (open, { name, bytes }) => {
        const read = readCodebook(bytes);
        if (!read.ok) return refuse('no codebook', name);
        const taken = namesTaken(open.study, read.entries);
        return give({
          entries: read.entries.map((entry) => ({
            name: entry.name,
            heading: entry.heading,
            brief: entry.definition.brief,
            seeds: seedsOf(open, entry),
            taken: taken.has(entry.name),
          })),
        });
      },
    ),

    addCodebook: room.look(
      async (open, { name, bytes, names, byHand }: Api['addCodebook']['takes']) => {
        const read = readCodebook(bytes);
        if (!read.ok) return refuse('no codebook', name);
        const wanted = new Set(names);
        const edits = codebookEdits(
          open.study,
          read.entries.filter((entry) => wanted.has(entry.name)),
          byHand,
          (entry) => seedsOf(open, entry),
          open.desk.context.mintId,
        );
        if (edits.length === 0) return refuse('nothing to take in');
        const refused = open.decide(edits);
        if (refused !== null) return refused;
        const after = await room.afterwards(open);
        if (isRefused(after)) return after;
        const added = edits.filter(({ kind }) => kind === 'themeAdded').length;
        return give({ overview: after.value, added });
      },
    ),
  };
}

/** The words that an entry gives; where it gives none, those of its name that are counted. */
function seedsOf(open: OpenStudy, { name, seeds }: CodebookEntry): string[] {
  const { language } = settingsOf(open.study.settings).text;
  const words = seeds.length > 0 ? seeds : (name.match(/[\p{L}\p{M}'’-]+/gu) ?? []);
  const forms = words.flatMap((word) => formFor(open.now, word.toLowerCase()) ?? []);
  return [...new Set(forms)].filter((form) => seeds.length > 0 || !isEveryday(form, language));
}

/** Little words of a name ("of", "the") say nothing of a theme. */
function isEveryday(form: string, language: keyof typeof wordLists): boolean {
  return form.length < 4 || wordLists[language].stopWords.includes(form);
}
