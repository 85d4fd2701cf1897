import { basename, dirname, join, resolve } from 'node:path';
import type { Fitted } from '../../engine/themes/index.ts';
import type { Desk } from '../desk.ts';
import type { EvidenceMade } from '../evidence.ts';
import { isEvidenceRefusal, sentenceForEvidence } from '../sentences/evidence.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import type { EvidenceOptions } from '../work/run-evidence.ts';
import { openStudy } from './open.ts';
import { ProgressLine, Stop, stopIfAsked, type ExitCode, type Terminal } from './terminal.ts';
import { stageFiles } from './write-files.ts';

export interface EvidenceCommand<Value> {
  /** The study as it was named, and where the table goes if that was said. */
  readonly study: string;
  readonly out: string | undefined;
  /** The table's ending where nothing else was said: "steady" gives NAME.steady.csv. */
  readonly ending: string;
  /** What the line of progress says. */
  readonly doing: string;
  readonly gather: (desk: Desk, options: EvidenceOptions) => Promise<EvidenceMade<Value>>;
  readonly text: (desk: Desk, fitted: Fitted, value: Value) => string;
  readonly table: (desk: Desk, fitted: Fitted, value: Value) => string;
}

/** Gathers evidence about the fit on screen: keeps it in the study, prints it, writes its table. */
export async function evidenceCommand<Value>(
  command: EvidenceCommand<Value>,
  terminal: Terminal,
): Promise<ExitCode> {
  const path = resolve(terminal.folder, command.study);
  const out =
    command.out === undefined
      ? join(dirname(path), `${basename(path).replace(/\.understory$/u, '')}.${command.ending}.csv`)
      : resolve(terminal.folder, command.out);
  const { desk, store, file } = await openStudy(command.study, terminal, {
    readOnly: false,
    call: ['evidence', command.ending],
  });
  try {
    // Tried first: what cannot be written there must not take minutes to be found out.
    const trial = await stageFiles(dirname(out), new Map([[basename(out), '']]), [file.path]);
    await trial.discard();
    const line = new ProgressLine(terminal);
    const made = await command.gather(desk, {
      signal: terminal.signal,
      onProgress: (fraction) =>
        line.show(`${command.doing}: ${Math.floor(fraction * 100)} %`, fraction),
    });
    line.end();
    stopIfAsked(terminal);
    if (!made.ok) {
      throw new Stop(isEvidenceRefusal(made) ? sentenceForEvidence(made) : sentenceFor(made));
    }
    const fitted = desk.fitted(desk.study.fit) as Fitted;
    const table = command.table(desk, fitted, made.value);
    const staged = await stageFiles(dirname(out), new Map([[basename(out), table]]), [file.path]);
    try {
      const written = store.flush(file);
      if (!written.ok) throw new Stop(sentenceFor(written));
      await staged.commit();
    } finally {
      await staged.discard();
    }
    terminal.out(command.text(desk, fitted, made.value));
    terminal.err(`Kept in the study; table written to ${command.out ?? basename(out)}\n`);
    return 0;
  } finally {
    file.close();
  }
}
