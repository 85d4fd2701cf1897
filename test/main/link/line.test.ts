import { describe, expect, it, vi } from 'vitest';
import { Line, limits } from '../../../main/link/index.ts';
import { fakeSession, overview, studyWord, type FakeSession } from './fake-session.ts';

interface Setting {
  readonly line: Line;
  readonly progress: unknown[];
  readonly faults: unknown[][];
}

function lineOf(session: FakeSession): Setting {
  const progress: unknown[] = [];
  const faults: unknown[][] = [];
  const line = new Line({
    handlers: session.handlers,
    onProgress: (id, point) => progress.push([id, point]),
    onFault: (...fault) => faults.push(fault),
  });
  return { line, progress, faults };
}

const call = (method: unknown, takes: unknown, id: unknown = 1, authorised = true) => ({
  id,
  method,
  takes,
  authorised,
});

describe('a call', () => {
  it('is answered with what the handler gives', async () => {
    const session = fakeSession({ overview: async () => ({ value: overview }) });
    const { line } = lineOf(session);
    expect(await line.call(call('overview', null))).toEqual({ value: overview });
    expect(session.calls).toEqual([{ method: 'overview', takes: null }]);
  });

  it('passes on a refusal of the handler as it is', async () => {
    const refused = { refused: 'There is no such study.', code: 'not found' };
    const { line } = lineOf(fakeSession({ openStudy: async () => refused }));
    const answer = await line.call(call('openStudy', { path: '/x', readOnly: false }));
    expect(answer).toBe(refused);
  });

  it('is refused from elsewhere, before anything of it is looked at', async () => {
    const session = fakeSession();
    const { line } = lineOf(session);
    const answer = await line.call(call('overview', null, 1, false));
    expect(answer).toMatchObject({ code: 'not authorised' });
    expect(session.calls).toEqual([]);
  });

  it.each(['', 'quit', 'constructor', '__proto__', 'toString', 7, null, undefined, ['overview']])(
    'of no known method is refused: %j',
    async (method) => {
      const session = fakeSession();
      const answer = await lineOf(session).line.call(call(method, null));
      expect(answer).toMatchObject({ code: 'unknown method' });
      expect(session.calls).toEqual([]);
    },
  );

  it('with a malformed payload is refused, naming the field and never its value', async () => {
    const session = fakeSession();
    const { line, faults } = lineOf(session);
    const answer = await line.call(call('nameTheme', { theme: 'a', name: { studyWord } }));
    expect(answer).toMatchObject({ code: 'malformed request' });
    expect(JSON.stringify(answer)).toContain('(name)');
    expect(JSON.stringify(answer)).not.toContain(studyWord);
    const attributes = { [studyWord]: 7 };
    const other = await line.call(
      call('describeParticipant', { participant: 'p', name: 'P', attributes }),
    );
    expect(JSON.stringify(other)).not.toContain(studyWord);
    const unknownKey = await line.call(
      call('nameTheme', { theme: 'a', name: 'b', [studyWord]: 1 }),
    );
    expect(unknownKey).toMatchObject({ code: 'malformed request' });
    expect(JSON.stringify(unknownKey)).not.toContain(studyWord);
    expect(session.calls).toEqual([]);
    expect(faults).toEqual([]);
  });

  it('with a file that is too large is refused with what to do', async () => {
    const bytes = new Uint8Array(limits.fileBytes + 1);
    const { line } = lineOf(fakeSession());
    const answer = await line.call(call('addTranscripts', { files: [{ name: 'a', bytes }] }));
    expect(answer).toMatchObject({ code: 'too large' });
  });

  it.each([undefined, null, '1', -1, 1.5, Number.NaN, 2 ** 60])(
    'with an id that is none is refused: %s',
    async (id) => {
      const { line } = lineOf(fakeSession());
      // Not call(): an id of undefined would become the default.
      const answer = await line.call({ id, method: 'overview', takes: null, authorised: true });
      expect(answer).toMatchObject({ code: 'malformed request' });
    },
  );

  it('that fails unexpectedly is a fault: a sentence for the person, a log without the payload', async () => {
    const error = new Error(`cannot code ${studyWord}`);
    const { line, faults } = lineOf(fakeSession({ find: () => Promise.reject(error) }));
    const answer = await line.call(call('find', { text: studyWord }));
    expect(answer).toMatchObject({ code: 'fault' });
    expect(JSON.stringify(answer)).not.toContain(studyWord);
    expect(faults).toEqual([['find', error]]);
  });

  it('that throws before it is a promise is a fault as well', async () => {
    const { line, faults } = lineOf(
      fakeSession({
        find: () => {
          throw new TypeError('x');
        },
      }),
    );
    expect(await line.call(call('find', { text: '' }))).toMatchObject({ code: 'fault' });
    expect(faults).toHaveLength(1);
  });
});

describe('a call that takes long', () => {
  /** A fit that reports once and ends when it is told to stop. */
  function slowFit() {
    return fakeSession({
      fit: (_takes, { onProgress, signal }) =>
        new Promise((resolve, reject) => {
          onProgress({ sweep: 1, bound: null, change: 0.5, fraction: 0.1 });
          signal.addEventListener('abort', () => {
            onProgress({ sweep: 2, bound: null, change: 0.4, fraction: 0.2 });
            reject(new DOMException('stopped', 'AbortError'));
          });
          if (signal.aborted) resolve({ value: null });
        }),
    });
  }
  const fit = { kind: 're-fit', themes: null };

  it('reports progress under its id, and stops when it is cancelled', async () => {
    const { line, progress, faults } = lineOf(slowFit());
    const answer = line.call(call('fit', fit, 41));
    await vi.waitFor(() => expect(progress).toHaveLength(1));
    line.cancel(40);
    line.cancel('41');
    line.cancel(41);
    expect(await answer).toMatchObject({ code: 'cancelled' });
    expect(progress.map((point) => (point as [number])[0])).toEqual([41, 41]);
    expect(faults).toEqual([]);
    line.cancel(41);
  });

  it('leaves the others answered meanwhile, and its id taken', async () => {
    const { line } = lineOf(slowFit());
    const answer = line.call(call('fit', fit, 1));
    expect(await line.call(call('overview', null, 2))).toEqual({ value: null });
    expect(await line.call(call('overview', null, 1))).toMatchObject({ code: 'malformed request' });
    line.cancel(1);
    await answer;
    expect(await line.call(call('overview', null, 1))).toEqual({ value: null });
  });

  it('is stopped when the window is gone, and nothing is answered afterwards', async () => {
    const session = slowFit();
    const { line } = lineOf(session);
    const answer = line.call(call('fit', fit, 1));
    await vi.waitFor(() => expect(session.calls).toHaveLength(1));
    line.hangUp();
    expect(await answer).toMatchObject({ code: 'cancelled' });
    expect(await line.call(call('overview', null, 2))).toMatchObject({ code: 'not authorised' });
    expect(session.calls).toHaveLength(1);
  });

  it('is refused where too many run', async () => {
    const { line } = lineOf(slowFit());
    const running = Array.from({ length: limits.running }, (_, id) =>
      line.call(call('fit', fit, id)),
    );
    expect(await line.call(call('overview', null, 9999))).toMatchObject({
      code: 'too many requests',
    });
    line.hangUp();
    await Promise.all(running);
  });
});
