import { Revision } from '#db/models/index.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import type { Problem } from '#lib/plan/types.ts';
import type { Actor } from '../accounts/actor.ts';
import { refuse } from '../errors.ts';
import { requireDraftPlan } from './get-draft.ts';

export interface DraftToSave {
  actor: Actor;
  planId: string;
  source: string;
  /** The version that the editor started from. */
  version: number;
  notes?: string | undefined;
}

/**
 * Keeps the text of a draft, with or without problems, and says what they are.
 * @throws CONFLICT when somebody else saved meanwhile: nothing is overwritten
 */
export async function saveDraft(draft: DraftToSave): Promise<{ version: number; problems: Problem[] }> {
  await requireDraftPlan(draft.actor, draft.planId);
  const { problems } = compilePlan(draft.source);
  const [changed] = await Revision.update(
    {
      source: draft.source,
      version: draft.version + 1,
      ...(draft.notes === undefined ? {} : { notes: draft.notes }),
    },
    { where: { planId: draft.planId, state: 'draft', version: draft.version } },
  );
  if (changed === 0) {
    refuse('CONFLICT', {
      detail:
        'Somebody saved this draft meanwhile, or it was published. Your text is still here: copy it, load the page again and put the two together.',
    });
  }
  return { version: draft.version + 1, problems };
}
