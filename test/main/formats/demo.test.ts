import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { defaultTextSettings, guessInterviewers, passagesOf } from '../../../engine/text/index.ts';
import { readTranscript } from '../../../main/formats/index.ts';

const folder = new URL('../../../resources/demo/', import.meta.url);

// Read off the files by eye: who asks and who answers.
describe.each([
  ['P01 ferry clerk.txt', 'Hanne Orrell', ['Margit Tarbrae']],
  ['P02 crofter.txt', 'INT', ['P02']],
  ['P03 shopkeeper.txt', 'Tom Vassick', ['Ansel Pike']],
  ['P04 teacher.txt', 'I', ['P04']],
  ['P05 guest house.docx', 'Interviewer', ['Ruth']],
  ['P06 couple.docx', 'Interviewer', ['Col', 'Edda']],
  ['P07 harbour cafe.docx', 'INT', ['P07']],
  ['P08 fisher.docx', 'INT', ['P08']],
  ['P09 builder.vtt', 'Interviewer', ['P09']],
  ['P10 student.vtt', 'Interviewer', ['P10']],
  ['P11 retired skipper.srt', 'INT', ['Old Jory']],
  ['P12 carer.srt', 'Tom', ['P12']],
])('the demo transcript %s', (name, interviewer, participants) => {
  test('has its speakers, its interviewer, and passages of a readable length', async () => {
    const result = await readTranscript(readFileSync(new URL(encodeURI(name), folder)), name);
    if (!result.ok) throw new Error(result.code);
    const { text, turns } = result.value;
    expect([...new Set(turns.map((turn) => turn.speaker))].sort()).toEqual(
      [interviewer, ...participants].sort(),
    );
    expect(guessInterviewers(text, turns)).toEqual([interviewer]);
    // No label was swallowed: none stands at the beginning of a line inside a turn.
    for (const turn of turns) {
      for (const label of [interviewer, ...participants]) {
        expect(text.slice(turn.start, turn.end)).not.toMatch(
          new RegExp(`(^|\\n)\\W*${label}\\s*:`),
        );
      }
    }
    const passages = passagesOf(
      { id: name, text, turns, roles: { [interviewer]: 'interviewer' }, participants: {} },
      defaultTextSettings,
    );
    for (const passage of passages) {
      expect(participants).toContain(passage.speaker);
      expect(passage.words).toBeLessThanOrEqual(125);
    }
  });
});
