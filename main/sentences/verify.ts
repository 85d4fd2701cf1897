import type { FitCheck, FitFound, HeadFound, TrailFault, Verified } from '../verify.ts';

/** One line a fit. */
export function fitCheckInWords({ sequence, fit, at, found }: FitCheck): string {
  const kind = fit.start.kind === 'warm' ? 're-fit' : 'fit from scratch';
  const themes = `${fit.themes.length} ${fit.themes.length === 1 ? 'theme' : 'themes'}`;
  return `${kind} of ${themes} (record ${sequence}, ${at}): ${fitFoundInWords(found)}`;
}

export function fitFoundInWords(found: FitFound): string {
  switch (found.code) {
    case 'holds':
      return 'holds';
    case 'differs':
      return `differs: ${whatDiffers[found.what]}`;
    case 'sealed':
      return `cannot be recomputed, sealed at ${found.at}`;
    case 'sealed before':
      return `cannot be recomputed, since it begins from record ${found.fit}, which was sealed at ${found.at}`;
    case 'compacted':
      return 'not checked, since its arrays were compacted away';
    case 'other method':
      return 'not checked, since another version of Understory made it by another method';
    case 'other settings':
      return 'not checked, since another version of Understory made it with other settings of the model';
    case 'stopped':
      return 'not checked, since it was stopped by a person half-way';
    case 'cancelled':
      return 'not checked, since the check was stopped';
  }
}

const whatDiffers: Record<Extract<FitFound, { code: 'differs' }>['what'], string> = {
  'stored words': 'the stored words are not the ones that were recorded',
  'stored result': 'the stored result is not the one that was recorded',
  priors: 'the decisions in the trail lead to other priors',
  result: 'made again, it comes out otherwise',
};

export function trailFaultInWords(fault: TrailFault): string {
  switch (fault.code) {
    case 'damage':
      return `Record ${fault.sequence}, at byte ${fault.offset}, ${damage[fault.reason]}.`;
    case 'edit':
      return `The edit in record ${fault.sequence} does not follow from those before it (${fault.why}).`;
    case 'removed':
      return `The content of record ${fault.sequence} was taken out, and no seal tells of it.`;
  }
}

const damage: Record<Extract<TrailFault, { code: 'damage' }>['reason'], string> = {
  header: 'is the file’s beginning, and it is not what was written',
  head: 'is no record',
  content: 'does not hold what was written',
  order: 'is another one: records were removed, inserted or swapped',
  chain: 'does not follow from the one before it: something was removed, inserted or swapped',
};

export function headInWords(noted: HeadFound): string {
  switch (noted.code) {
    case 'last':
      return 'The noted hash is that of the last record: nothing was added or cut off since.';
    case 'earlier':
      return `The noted hash is that of record ${noted.sequence}: the study went on since, on the same chain.`;
    case 'not there':
      return 'The noted hash is nowhere in the chain: this is another history than the one it was noted from.';
  }
}

export function outcomeInWords({ outcome, faults, edits, fits }: Verified): string {
  if (outcome === 'differs') {
    return faults.length > 0
      ? 'This is not what was written: do not rely on it, and look for a backup.'
      : 'Something differs: see above.';
  }
  const decisions = `${edits} ${edits === 1 ? 'decision' : 'decisions'}`;
  if (outcome === 'not checked') {
    return `The chain of ${decisions} holds, and not every fit could be checked.`;
  }
  if (fits.length === 0) return `The chain of ${decisions} holds. There is no fit to make again.`;
  const held = fits.filter(({ found }) => found.code === 'holds').length;
  return `The chain of ${decisions} holds, and ${held} of ${fits.length} ${fits.length === 1 ? 'fit' : 'fits'} came out the same, bit for bit.`;
}

/** What the chain by itself cannot show. */
export const limitOfTheChain =
  'The chain has no key: that records were cut off its end, or that it was made anew, shows only ' +
  'against a hash noted elsewhere, in a report for one.';
