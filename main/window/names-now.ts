import type { IdentifierGroup } from '../../engine/text/index.ts';
import { transcriptsInOrder, type Desk } from '../desk.ts';
import { settingsOf } from '../../engine/themes/index.ts';
import { NameSearch } from '../work/name-search.ts';
import { Kept } from './kept.ts';

/** What could tell who somebody is in the texts of now, searched again when one of them changes. */
export class NamesNow {
  readonly #desk: Desk;
  readonly #search = new NameSearch();
  readonly #groups = new Kept<Promise<readonly IdentifierGroup[]>>();

  constructor(desk: Desk) {
    this.#desk = desk;
  }

  groups(): Promise<readonly IdentifierGroup[]> {
    const { study } = this.#desk;
    const { language } = settingsOf(study.settings).text;
    const transcripts = transcriptsInOrder(study);
    const on = [
      language,
      ...transcripts.flatMap(({ id, text, turns, facts }) => [
        id,
        text.sequence,
        turns,
        facts?.language,
      ]),
    ];
    return this.#groups.get(on, () => {
      const groups = this.#search.groups(
        transcripts.map(({ id, text, turns, facts }) => {
          const spoken = facts?.language ?? language;
          const labels = [...new Set(turns.map(({ speaker }) => speaker))].join('\n');
          return {
            id,
            version: `${text.sequence} ${spoken} ${turns.length} ${labels}`,
            text: () => ({ id, text: this.#desk.text(id), turns, language: spoken }),
          };
        }),
      );
      groups.catch(() => this.#groups.forget());
      return groups;
    });
  }

  close(): void {
    this.#search.close();
  }
}
