import type { ErasedView, Refused, SealView, WithdrawalView } from '../api.ts';
import { placesFor } from '../backup-settings.ts';
import { whyNotErased } from '../commands/forgetting.ts';
import type { Erased, EraseOptions } from '../forgetting/erase.ts';
import { planSeal, seal } from '../forgetting/sealing.ts';
import { planWithdrawal, withdraw, type WithdrawalRequest } from '../forgetting/withdrawal.ts';
import { rewriteBackups } from '../project/index.ts';
import { beyondReach, exportedInWords, mentionInWords } from '../sentences/forgetting.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { give, isRefused, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import { loadAgain } from './opening.ts';
import type { Room } from './room.ts';
import type { CallContext, Handlers } from './session-types.ts';

/** A person withdrawn, originals sealed: what goes is shown first, then goes for good. */
export function forgettingHandlers(
  room: Room,
): Pick<Handlers, 'withdrawalView' | 'withdrawParticipant' | 'sealView' | 'sealOriginals'> {
  return {
    withdrawalView: room.look((open, request: WithdrawalRequest) => {
      const plan = planWithdrawal(open.desk, request);
      if (!plan.ok) return open.refusal(plan);
      const { participant, transcripts, shared, codings, memos, fits } = plan.value;
      const names = (ids: readonly string[]): string[] =>
        ids.map((id) => open.study.transcripts.get(id)?.name ?? '');
      const view: WithdrawalView = {
        participant: participant.name,
        transcripts: names(transcripts),
        shared: names(shared),
        codings,
        memos,
        fits,
        exported: plan.value.exported.map(exportedInWords),
        names: plan.value.names,
        mentions: plan.value.mentions.map(mentionInWords),
        beyondReach,
      };
      return give(view);
    }),

    withdrawParticipant: (takes, context) =>
      eraseInTurn(room, context, (open, options) =>
        withdraw(open.file, open.desk, open.desk.context, takes, {
          ...options,
          refit: takes.refit,
        }),
      ),

    sealView: room.look<null, SealView | null>((open) => {
      const plan = planSeal(open.file, open.desk);
      if (!plan.ok) return give(null);
      const { transcripts, wordings, originals, fits, exported, names } = plan.value;
      return give({
        transcripts: transcripts.map((id) => open.study.transcripts.get(id)?.name ?? ''),
        wordings,
        originals,
        fits,
        exported: exported.map(exportedInWords),
        names: names.map(({ name, mark, kind, mentions }) => ({
          name,
          standIn: mark,
          person: kind === 'person',
          mentions: mentions.map(mentionInWords),
        })),
        beyondReach,
      });
    }),

    sealOriginals: (takes, context) =>
      eraseInTurn(room, context, (open, options) =>
        seal(open.file, open.desk, open.desk.context, takes, { ...options, refit: takes.refit }),
      ),
  };
}

type Act = (
  open: OpenStudy,
  options: Pick<EraseOptions, 'fit'>,
) => Promise<Erased | { readonly ok: false; readonly code: 'nothing to seal' }>;

/** Nothing else of the study may move meanwhile; afterwards it is read anew, backups are as well. */
function eraseInTurn(room: Room, context: CallContext, act: Act) {
  return room.inTurn(() =>
    room.look<null, ErasedView>(async (open) => {
      if (open.file.readOnly) return refuse('reading only');
      if (open.fitting || open.gathering) return refuse('fit running');
      open.refinement?.stop.abort();
      const newcomer = addReader(open);
      if (newcomer !== null) return newcomer;
      open.fitting = true;
      let done: Awaited<ReturnType<Act>>;
      try {
        done = await act(open, {
          fit: {
            signal: AbortSignal.any([context.signal, open.closing.signal]),
            onProgress: ({ sweep, bound, change }, fraction) =>
              context.onProgress({ sweep, bound, change, fraction }),
          },
        });
      } finally {
        open.fitting = false;
      }
      if (!done.ok) return { code: done.code, refused: whyNotErased(done) };
      const places = placesFor(room.backups.store.read(), open.file.path);
      const backups = rewriteBackups(open.file, places, { now: () => room.surroundings.now() });
      const after = await loadAgain(room, open);
      if (isRefused(after)) return after;
      return give({
        overview: after.value,
        records: done.value.records,
        fits: done.value.fits,
        refitted: done.value.refitted,
        backupsRemoved: backups.removed.length,
        backupsLeft: backups.left.map((failure) => sentenceFor(failure)),
      });
    })(null, context),
  );
}

/** Who erases stands in the trail, also where it is their first decision. */
function addReader(open: OpenStudy): Refused | null {
  const { reader, study } = open;
  if (study.readers.has(reader.id)) return null;
  const made = open.desk.make([{ edit: { kind: 'readerAdded', reader } }]);
  return made.ok ? null : open.refusal(made);
}
