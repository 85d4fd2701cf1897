import { hash32 } from './hash32.ts';
import type { IdentifierKind } from '../../engine/spans/index.ts';

/** Names to stand in for names: short, of several origins, and of people of any age. */
const people =
  `Alba Ada Aino Amal Amos Anders Anouk Arno Asha Astrid Aziz Bela Berit Boris Bruno Carla Cato
  Celia Clara Cleo Dana Daria Delia Dina Doro Edgar Elio Elke Elsa Emil Enid Erik Esme Fadia Felix Filip
  Flora Frida Gita Greta Gus Hedda Hella Henk Hilda Hugo Ibo Ida Ilse Imani Ines Ingo Iris Ivar Jana Jasper
  Joris Juna Kaja Karim Kira Klara Lale Lars Lea Leif Lena Lina Linus Livia Lotte Luca Magda Malin Marlo
  Mila Mina Mona Nadim Naomi Nelly Nils Noor Odile Olga Orla Oskar Otto Pablo Petra Quinn Rafi Ragna Remy
  Rita Rolf Rosa Runa Saga Selma Signe Silas Simo Sita Sonja Sven Tara Thea Tilda Timo Tove Ulla Uma Vera
  Viktor Vivi Willem Yara Yuna Zeno Zoe`
    .split(/\s+/u)
    .filter((name) => name !== '');

const surnames =
  `Abel Almond Ashby Barlow Beech Birkin Calder Carrow Coburn Dale Denby Elder Elstow Farrow
  Fenwick Garrow Gorse Haddon Harrow Hazel Iver Jarrow Kerrow Lark Linden Lorne Marlow Merrow Norden Oakley
  Orchard Penrow Quarrie Rowan Sallow Selby Tarn Thorne Upton Vale Varley Wendell Winterby Yarrow`
    .split(/\s+/u)
    .filter((name) => name !== '');

const places =
  `Ashmere Birkvale Calderby Dunmarrow Eastmere Fernby Garthwick Hollinsea Ivermere Kelderby
  Larkhaven Merrowby Netherfold Oxmere Penwarrow Quarrowby Rushmere Sallowby Tarnwick Underfell Vellmere
  Westerby Yarnmere`
    .split(/\s+/u)
    .filter((name) => name !== '');

/** What stands for the kind of a thing; brackets keep it out of the counted words. */
export const generalisations: Readonly<Record<IdentifierKind, string>> = {
  person: 'somebody',
  place: 'a place',
  organisation: 'an organisation',
  'other name': '[name]',
  'e-mail': '[e-mail address]',
  telephone: '[telephone number]',
  web: '[web address]',
  date: '[date]',
  age: '90 or older',
  postcode: '[postcode]',
  number: '[number]',
};

/** Kinds that nobody gives another name to. */
export function isGeneralisedFirst(kind: IdentifierKind): boolean {
  return kind !== 'person' && kind !== 'place';
}

/**
 * A stand-in for a name: the same for the same study and name at every look, none that is taken, and
 * none with the same first letter, which would give the name away.
 */
export function suggestStandIn(
  kind: IdentifierKind,
  name: string,
  seed: string,
  isSurname: boolean,
  isTaken: (standIn: string) => boolean,
): string {
  if (isGeneralisedFirst(kind)) return generalisations[kind];
  const from = kind === 'place' ? places : isSurname ? surnames : people;
  const first = hash32(`${seed} ${kind} ${name.toLowerCase()}`) % from.length;
  const initial = name.charAt(0).toUpperCase();
  for (const strict of [true, false]) {
    for (let step = 0; step < from.length; step++) {
      const candidate = from[(first + step) % from.length];
      if (strict && candidate.startsWith(initial)) continue;
      if (!isTaken(candidate)) return candidate;
    }
  }
  for (let number = 1; ; number++) {
    const candidate = `${kind === 'place' ? 'Place' : 'Person'} ${number}`;
    if (!isTaken(candidate)) return candidate;
  }
}
