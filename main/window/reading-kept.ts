import * as v from 'valibot';
import type { ReadingPreferences, StoppedAt } from '../api.ts';
import { payloads } from '../link/payloads.ts';
import { give } from './answers.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

const preferencesKey = 'reading';
const stoppedKey = 'stopped';
/** Studies for which it is remembered where somebody stopped; the oldest go first. */
const studiesKept = 100;

type Kept = Pick<Handlers, 'readingKept' | 'keepReading'>;

/** How a person reads and where they stopped, kept on the machine by the study's id alone. */
export function readingKeptHandlers(room: Room): Kept {
  const { machine } = room.surroundings;
  const stoppedAll = async (): Promise<Map<string, unknown>> => {
    const value = await machine?.get(stoppedKey);
    const usable = typeof value === 'object' && value !== null && !Array.isArray(value);
    return new Map(usable ? Object.entries(value) : []);
  };
  return {
    readingKept: async () => {
      const study = room.open?.study.id;
      const [preferences, stopped] = [await machine?.get(preferencesKey), await stoppedAll()];
      // A file of the settings may have been written by another version, or by hand.
      return give({
        preferences: usable<ReadingPreferences>({ preferences, stopped: null }, 'preferences'),
        stopped:
          study === undefined
            ? null
            : usable<StoppedAt>({ preferences: null, stopped: stopped.get(study) }, 'stopped'),
      });
    },

    keepReading: async ({ preferences, stopped }) => {
      if (preferences !== null) await machine?.keep(preferencesKey, preferences);
      const study = room.open?.study.id;
      if (stopped !== null && study !== undefined) {
        const all = await stoppedAll();
        all.delete(study);
        all.set(study, stopped);
        const kept = [...all].slice(-studiesKept);
        await machine?.keep(stoppedKey, Object.fromEntries(kept));
      }
      return give(null);
    },
  };
}

function usable<Value>(kept: unknown, which: 'preferences' | 'stopped'): Value | null {
  const read = v.safeParse(payloads.keepReading, kept);
  return read.success ? (read.output[which] as Value | null) : null;
}
