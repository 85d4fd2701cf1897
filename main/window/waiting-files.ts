import type { DoubleOffer, TableOffer } from '../api.ts';
import { guessColumns } from '../gather/answers.ts';
import type { Double, FoundTable } from '../gather/gather.ts';
import type { OpenStudy } from './open-study.ts';

/** Files that were read and wait for a person's word, as long as their study is open. */
class WaitingFiles {
  readonly tables = new Map<string, FoundTable>();
  readonly doubles = new Map<string, Double>();
  #next = 1;

  table(found: FoundTable): TableOffer {
    const token = String(this.#next++);
    this.tables.set(token, found);
    return {
      table: token,
      file: found.file,
      sheets: found.table.sheets.map((sheet) => ({
        name: sheet.name,
        rows: sheet.rows.length - 1,
        columns: guessColumns(sheet),
        first: sheet.rows.slice(1, 1 + shownRows).map((row) => row.map(cut)),
      })),
    };
  }

  double(open: OpenStudy, found: Double): DoubleOffer {
    const token = String(this.#next++);
    this.doubles.set(token, found);
    const { transcript, file } = found;
    return {
      double: token,
      file: file.name,
      transcript,
      transcriptName: open.study.transcripts.get(transcript)?.name ?? '',
      codings: open.study.codings.get(transcript)?.size ?? 0,
    };
  }
}

const shownRows = 5;
const shownUnits = 160;

function cut(cell: string): string {
  return cell.length <= shownUnits ? cell : `${cell.slice(0, shownUnits - 1).trimEnd()}…`;
}

const waiting = new WeakMap<OpenStudy, WaitingFiles>();

export function waitingFiles(open: OpenStudy): WaitingFiles {
  let files = waiting.get(open);
  if (files === undefined) {
    files = new WaitingFiles();
    waiting.set(open, files);
  }
  return files;
}
