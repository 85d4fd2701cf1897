import type { PlanRefusal } from '../decisions.ts';
import type { DeskResult } from '../desk.ts';
import { sentenceFor, sentenceForPlan } from '../sentences/sentences.ts';
import { Stop } from './terminal.ts';

/** The value of a result; stops the command with its sentence where it was refused. */
export function refuse<Value>(result: DeskResult<Value> | PlanRefusal): Value {
  if (result.ok) return result.value;
  throw new Stop(isPlanRefusal(result) ? sentenceForPlan(result) : sentenceFor(result));
}

function isPlanRefusal(
  refusal: Exclude<DeskResult<unknown> | PlanRefusal, { readonly ok: true }>,
): refusal is PlanRefusal {
  return refusal.code === 'setting' || refusal.code.startsWith('plan ');
}
