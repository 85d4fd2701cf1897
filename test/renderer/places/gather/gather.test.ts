import { describe, expect, it } from 'vitest';
import { GatherState, gatherStateOf } from '../../../../renderer/places/gather/gather.svelte.ts';
import type { LooseFile } from '../../../../renderer/places/gather/loose-files.ts';
import { StudyState } from '../../../../renderer/state/study.svelte.ts';
import { fakeGather, type FakeLink } from '../fake-gather.ts';

function scene(): { link: FakeLink; study: StudyState; gather: GatherState } {
  const link = fakeGather({ transcripts: 0 });
  const study = new StudyState(link);
  return { link, study, gather: new GatherState(study) };
}

const file = (name: string, size = 10): LooseFile => ({
  name,
  size,
  read: () => Promise.resolve(new Uint8Array(size)),
});

const unreadable = (name: string): LooseFile => ({
  name,
  size: 10,
  read: () => Promise.reject(new Error('gone')),
});

const namesSent = ({ calls }: FakeLink): string[][] =>
  calls
    .filter(({ method }) => method === 'addTranscripts')
    .map(({ takes }) => (takes as { files: { name: string }[] }).files.map(({ name }) => name));

describe('adding files', () => {
  it('says how many transcripts came in', async () => {
    const { study, gather } = scene();
    await gather.add([file('a.txt'), file('b.docx')]);
    expect(study.message).toEqual({ kind: 'done', text: '2 transcripts added.' });
    expect(gather.adding).toBeNull();
  });

  it('sends transcripts in batches and tables of attributes after all of them', async () => {
    const { link, gather } = scene();
    const transcripts = Array.from({ length: 9 }, (_, index) => file(`t${index}.txt`));
    await gather.add([file('attributes.csv'), ...transcripts]);
    const sent = namesSent(link);
    expect(sent.flat()).toEqual([...transcripts.map(({ name }) => name), 'attributes.csv']);
    expect(sent.at(-1)).toEqual(['attributes.csv']);
    expect(sent.length).toBeGreaterThan(2);
  });

  it('never puts two large files into one call', async () => {
    const { link, gather } = scene();
    await gather.add([file('a.txt', 20_000_000), file('b.txt', 20_000_000)]);
    expect(namesSent(link)).toEqual([['a.txt'], ['b.txt']]);
  });

  it('keeps what was left out, each with its sentence, until it is dismissed', async () => {
    const { gather } = scene();
    await gather.add([file('scan.pdf'), file('a.txt')]);
    await gather.add([file('notes.pdf')]);
    expect(gather.skipped.map((one) => one.file)).toEqual(['scan.pdf', 'notes.pdf']);
    expect(gather.skipped.every(({ sentence }) => sentence.endsWith('.'))).toBe(true);
    gather.dismissSkipped();
    expect(gather.skipped).toEqual([]);
  });

  it('names a file once that was left out twice', async () => {
    const { gather } = scene();
    await gather.add([file('scan.pdf')]);
    await gather.add([file('scan.pdf')]);
    expect(gather.skipped).toHaveLength(1);
  });

  it('goes on after a file that can no longer be read', async () => {
    const { link, gather } = scene();
    await gather.add([unreadable('gone.txt'), file('a.txt')]);
    expect(gather.skipped.map((one) => one.file)).toEqual(['gone.txt']);
    expect(namesSent(link)).toEqual([['a.txt']]);
  });

  it('stops where a whole call is refused, says why and names what was not tried', async () => {
    const { link, study, gather } = scene();
    link.answer('addTranscripts', () => ({ refused: 'The drive is full.', code: 'no space' }));
    await gather.add(Array.from({ length: 10 }, (_, index) => file(`t${index}.txt`)));
    expect(study.message).toEqual({ kind: 'refused', text: 'The drive is full.' });
    expect(namesSent(link)).toHaveLength(1);
    expect(gather.skipped.map((one) => one.file)).toEqual(['t8.txt', 't9.txt']);
    expect(gather.adding).toBeNull();
  });

  it('says whose attributes found nobody, and takes it back once a corrected table comes', async () => {
    const { link, gather } = scene();
    await gather.addAttributes(file('attributes.csv'));
    expect(gather.unmatched).toEqual([{ file: 'attributes.csv', names: ['P1O', 'Ansel Pike'] }]);
    expect(gather.section).toBe('participants');
    link.answer('addAttributes', () => ({ value: { described: 13, unmatched: [] } }));
    await gather.addAttributes(file('attributes.csv'));
    expect(gather.unmatched).toEqual([]);
  });

  it('does nothing while other files are being added', async () => {
    const { link, gather } = scene();
    const first = gather.add([file('a.txt')]);
    await gather.add([file('b.txt')]);
    await first;
    expect(namesSent(link)).toEqual([['a.txt']]);
  });
});

describe('the state of Gather', () => {
  it('is the same when a person comes back to it', () => {
    const { study } = scene();
    expect(gatherStateOf(study)).toBe(gatherStateOf(study));
  });
});
