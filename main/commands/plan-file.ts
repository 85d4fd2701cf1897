import { readFile } from 'node:fs/promises';
import { resolve } from 'node:path';
import { codeOf } from '../gather/find-files.ts';
import { parsePlan, type Plan } from '../plan.ts';
import { settingsFault } from '../../engine/themes/index.ts';
import { sentenceForPlan, sentenceForSetting } from '../sentences/sentences.ts';
import { Stop } from './terminal.ts';

/** A plan from its file; stops the command where there is none or it is off. */
export async function readPlan(path: string, folder: string): Promise<Plan> {
  let text: string;
  try {
    text = await readFile(resolve(folder, path), 'utf8');
  } catch (error) {
    const why = {
      'not found': 'is not there',
      'not allowed': 'may not be read by this account',
      'cannot read': 'could not be read',
    };
    throw new Stop(`The plan “${path}” ${why[codeOf(error)]}; check its name and place.`, 2);
  }
  const plan = parsePlan(text.replace(/^\uFEFF/u, ''));
  if (!plan.ok) throw new Stop(sentenceForPlan(plan), 2);
  const fault = settingsFault(plan.value.settings);
  if (fault !== null) throw new Stop(sentenceForSetting(fault), 2);
  return plan.value;
}
