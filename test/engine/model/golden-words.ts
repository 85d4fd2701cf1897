import {
  defaultTextSettings,
  prepare,
  turnsFromText,
  type Language,
  type Prepared,
  type WordLists,
} from '../../../engine/text/index.ts';

// Letters whose case, category or composition a JavaScript engine looks up in its Unicode tables.
const texts: readonly string[] = [
  `INT: How did the weaving begin?
Odile: We were weaving on my aunt’s loom, a wide one; she’d woven since nineteen-fifty. Émile carried
the wool, and Émile’s sister (E\u0301mile, they wrote) dyed it in 3 baths. Mm-hm. Dyeing took days!
INT: And then?
Odile: Then the looms were sold. “Sold,” my aunt said… We don’t weave now, we mend 🧵 and we sing.`,
  `INT: Wie war die Straße früher?
Jürgen: Die Straße war laut, die STRASSE ist leer. Größe zählt nicht, sagt mein Nachbar aus İzmir;
sein Café heißt «Ωδή». Der Fluß, ﬁxe Zeiten, 12,5 Meter, Ǆ und ǆ – alles blieb, alles ging.
INT: Was blieb?
Jürgen: Der Fluß blieb, das Café blieb. Меня звали Юрий, sagte er, und der Fluß blieb.`,
];

const lists: WordLists = {
  eng: { stopWords: ['the', 'and', 'we', 'it', 'don’t'], fillers: ['mm-hm'] },
  deu: { stopWords: ['die', 'der', 'und'], fillers: [] },
};

/** Words counted from a small invented study, in two languages, with stems and without. */
export function goldenWords(): Prepared[] {
  const transcripts = texts.map((text, index) => ({
    id: `t${index}`,
    text,
    turns: turnsFromText(text).turns,
    roles: { INT: 'interviewer' as const },
    participants: {},
  }));
  const choices: readonly [Language, boolean][] = [
    ['eng', false],
    ['eng', true],
    ['deu', true],
  ];
  return choices.map(([language, stemming]) =>
    prepare(
      transcripts,
      {
        ...defaultTextSettings,
        language,
        stemming,
        passageMinimumWords: 8,
        passageMaximumWords: 16,
        minimumPassages: 1,
        minimumParticipants: 1,
        maximumPassageShare: 1,
      },
      lists,
      ['loom'],
    ),
  );
}
