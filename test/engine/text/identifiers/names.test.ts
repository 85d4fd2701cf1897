import { describe, expect, it } from 'vitest';
import { groupIdentifiers, turnsFromText } from '../../../../engine/text/index.ts';
import { search } from './planted-text.ts';

/** What is found, as "kind: words", in the order of the text. */
function found(text: string, language = 'eng'): string[] {
  return search(text, language).map(({ kind, start, end }) => `${kind}: ${text.slice(start, end)}`);
}

function groups(text: string, language = 'eng') {
  return groupIdentifiers(search(text, language), () => text);
}

describe('names of persons', () => {
  it('joins the ways in which one name is written, the possessive left out', () => {
    const text =
      'I saw Ruth today. That is Ruth’s bag. RUTH shouted back. Little Ruthie was with her.';
    const [ruth, ...others] = groups(text);
    expect(others).toEqual([]);
    expect(ruth).toMatchObject({ kind: 'person', name: 'Ruth' });
    expect(ruth!.forms).toEqual([
      { form: 'Ruth', occurrences: 2 },
      { form: 'RUTH', occurrences: 1 },
      { form: 'Ruthie', occurrences: 1 },
    ]);
    expect(ruth!.places.map(({ form }) => form)).toEqual(['Ruth', 'Ruth', 'RUTH', 'Ruthie']);
  });

  it('keeps a boat named after a woman apart from the woman', () => {
    const text = 'My aunt Margit rang. We went over on the Margit and it was rough.';
    expect(found(text)).toEqual(['person: Margit', 'other name: Margit']);
    expect(groups(text)).toHaveLength(2);
  });

  it('keeps a surname that is a place apart from the place', () => {
    expect(found('Mr Stirling drives the bus. He was born in Stirling.')).toEqual([
      'person: Stirling',
      'place: Stirling',
    ]);
  });

  it('finds names that no list has by what stands around them', () => {
    expect(found('and then my sister Vrelka came, and Vrelka said no')).toEqual([
      'person: Vrelka',
      'person: Vrelka',
    ]);
    expect(found('It was a man called Oddrik who did it.')).toEqual(['person: Oddrik']);
  });

  it('takes given name and surname each by itself, without title and initial', () => {
    expect(found('We asked Dr J. Halvorsen and old Mrs Annie Pottinger.')).toEqual([
      'person: Halvorsen',
      'person: Annie',
      'person: Pottinger',
    ]);
  });

  it('leaves words that only open a sentence, months, days and languages alone', () => {
    expect(
      found(
        'Will you come? May we? Mark my words. In May it rains. On Monday I speak English. ' +
          '[laughs] There was hope. "Grace," the book said, "is rare." I said I would.',
      ).filter((each) => !each.endsWith('Grace')),
    ).toEqual([]);
  });

  it('takes a word that is a name as well for a name where somebody does something', () => {
    expect(found('and then Will came over and Rose said that May Ollard knew')).toEqual([
      'person: Will',
      'person: Rose',
      'person: May',
      'person: Ollard',
    ]);
  });

  it('finds the name in a speaker’s label, and no role', () => {
    const text = 'Interviewer: How was it?\nVrelka: It was fine.\nInterviewer: And then?';
    expect(turnsFromText(text).turns).toHaveLength(3);
    expect(found(text)).toEqual(['person: Vrelka']);
  });

  it('does not take German nouns for names', () => {
    expect(
      found(
        'Ich habe die Angst und den Wind im Hafen noch im Ohr, sagt meine Tochter Silke.',
        'deu',
      ),
    ).toEqual(['person: Silke']);
    expect(found('Ruths Haus steht in Bremerhaven, und Ruth wohnt da gern.', 'deu')).toEqual([
      'person: Ruths',
      'place: Bremerhaven',
      'person: Ruth',
    ]);
  });

  it('changes languages with the speaker', () => {
    const german =
      'Ich war in dem Zimmer und habe die Schritte auf dem Gang gezählt und dann war da nur noch das Meer und die Tür.';
    expect(
      found(`Edda: ${german}\nCol: That was hard for Edda, you know, and for the two of us.`),
    ).toEqual(['person: Edda', 'person: Col', 'person: Edda']);
  });
});

describe('names of places, organisations and other things', () => {
  it('takes a place’s and an organisation’s name as a whole', () => {
    expect(
      found('She lives on Lantern Street near the Isle of Sula and works at St Olaf’s School.'),
    ).toEqual(['place: Lantern Street', 'place: Isle of Sula', 'organisation: St Olaf’s School']);
  });

  it('does not take a name for a word because an address writes it small', () => {
    expect(found('Write to skarvoy.stores@example.org. I live in Skarvoy now.')).toEqual([
      'e-mail: skarvoy.stores@example.org',
      'place: Skarvoy',
    ]);
  });

  it('takes what a thing is called for another name', () => {
    expect(found('We had a dog called Bess and a boat called Morning Light.')).toEqual([
      'other name: Bess',
      'other name: Morning Light',
    ]);
  });
});

describe('what has a shape', () => {
  it('is found as it is written and as it is spoken', () => {
    expect(
      found('it is ruth dot mackay at islandmail dot org, or oh one six three two, nine six oh'),
    ).toEqual([
      'e-mail: ruth dot mackay at islandmail dot org',
      'telephone: oh one six three two, nine six oh',
    ]);
  });

  it('is no time of a recording, no sum of money, no year and no count', () => {
    expect(
      found('[00:14:11] in 2019 it cost 1200 pounds for 90 people, at half past ten, 36:04'),
    ).toEqual([]);
  });

  it('is an age only above 89', () => {
    expect(found('he is 84 years old and she is 91 years old, and granny was ninety-six')).toEqual([
      'age: 91 years old',
      'age: ninety-six',
    ]);
  });
});
