import { describe, expect, it } from 'vitest';
import { ReportState } from '../../../../renderer/places/report/report.svelte.ts';
import { StudyState } from '../../../../renderer/state/study.svelte.ts';
import { fakeGather } from '../fake-gather.ts';

function scene() {
  const link = fakeGather({ confirmed: 2, dialogs: true });
  const study = new StudyState(link);
  const report = new ReportState(study);
  return { link, study, report };
}

describe('what is ticked for a report', () => {
  it('is what a person read and stands behind, and guarded, until somebody says otherwise', () => {
    const { report } = scene();
    expect(report.request).toEqual({
      standings: ['confirmed', 'by hand'],
      themes: null,
      guard: true,
    });
  });

  it('keeps standings in one order, whatever the order of the ticks', () => {
    const { report } = scene();
    report.tick('confirmed', false);
    report.tick('rejected', true);
    report.tick('suggested', true);
    report.tick('confirmed', true);
    report.tick('confirmed', true);
    expect(report.request.standings).toEqual(['confirmed', 'by hand', 'suggested', 'rejected']);
  });

  it('names themes only where some are left out', () => {
    const { report } = scene();
    report.someThemes(['a', 'b']);
    report.tickTheme('a', false);
    report.tickTheme('c', true);
    expect(report.request.themes).toEqual(['b', 'c']);
    report.allThemes();
    expect(report.request.themes).toBeNull();
  });
});

describe('saving', () => {
  it('asks for the output as ticked and says where it was put', async () => {
    const { link, study, report } = scene();
    report.begin();
    await Promise.resolve();
    await new Promise((done) => setTimeout(done));
    report.tick('suggested', true);
    await report.save('csv');
    expect(link.calls.find(({ method }) => method === 'report')?.takes).toEqual({
      standings: ['confirmed', 'by hand', 'suggested'],
      themes: null,
      guard: true,
      format: 'csv',
    });
    expect(study.message).toEqual({ kind: 'done', text: 'Saved: /home/ada/coded-excerpts.csv' });
    expect(report.saving).toBeNull();
  });

  it('says nothing where the dialog was cancelled', async () => {
    const { link, study, report } = scene();
    link.answer('saveFile', () => ({ value: null }));
    report.begin();
    await new Promise((done) => setTimeout(done));
    await report.save('csv');
    expect(study.message).toBeNull();
  });

  it('shows the sentence where an output is refused', async () => {
    const { link, study, report } = scene();
    link.answer('report', () => ({ refused: 'Fit the study first.', code: 'no fit' }));
    await report.save('methods');
    expect(study.message).toEqual({ kind: 'refused', text: 'Fit the study first.' });
    expect(link.calls.some(({ method }) => method === 'saveFile')).toBe(false);
  });
});
