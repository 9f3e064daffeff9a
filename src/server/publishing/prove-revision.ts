import { Revision } from '#db/models/index.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import { provePlan } from '#lib/plan/prove.ts';
import type { Actor } from '../accounts/actor.ts';
import { refuse } from '../errors.ts';
import { enqueue } from '../jobs/enqueue.ts';
import { requireDraftPlan } from './get-draft.ts';
import type { ProofRecord } from '#lib/plan/proof-record.ts';
import { hashSource } from './hash-source.ts';

const emptyProof = (source: string, state: ProofRecord['state']): ProofRecord => ({
  state,
  sourceHash: hashSource(source),
  progress: 0,
  proved: [],
  tried: [],
  failures: [],
  ranAt: new Date().toISOString(),
});

/** Asks for a range proof of the draft as it is saved now; a job runs it. @throws CONFLICT without a draft */
export async function requestProof(actor: Actor, planId: string): Promise<ProofRecord> {
  await requireDraftPlan(actor, planId);
  const draft = await Revision.findOne({ where: { planId, state: 'draft' } });
  if (!draft) return refuse('CONFLICT', { detail: 'There is no draft to prove.' });
  const proof = emptyProof(draft.source, 'waiting');
  await draft.update({ proof }, { fields: ['proof'], silent: true });
  await enqueue('prove-revision', { revisionId: draft.id }, { key: `prove:${draft.id}` });
  return proof;
}

/** How far the proof is. */
export async function readProof(actor: Actor, planId: string): Promise<ProofRecord | null> {
  await requireDraftPlan(actor, planId);
  const draft = await Revision.findOne({ where: { planId, state: 'draft' }, attributes: ['proof'] });
  return draft?.proof ?? null;
}

/** How often progress is written down while a proof runs, in milliseconds. */
const TELL_EVERY = 500;

/** Runs the range proof of a draft; safe to run again. A text that changed meanwhile makes the result say so by its hash. */
export async function proveRevision(revisionId: string): Promise<void> {
  const revision = await Revision.findByPk(revisionId);
  if (revision?.state !== 'draft') return;
  const { source } = revision;
  const { plan, problems } = compilePlan(source);
  const keep = async (proof: ProofRecord) => {
    await Revision.update({ proof }, { where: { id: revisionId, state: 'draft' }, silent: true });
  };
  if (!plan) {
    await keep({
      ...emptyProof(source, 'fails'),
      failures: problems.map((problem) => `Line ${problem.line}: ${problem.message}`),
    });
    return;
  }
  const run = provePlan(plan, { seed: 1, maxTries: 4000 });
  let told = 0;
  let step = run.next();
  while (!step.done) {
    if (Date.now() - told > TELL_EVERY) {
      told = Date.now();
      await keep({ ...emptyProof(source, 'running'), progress: Math.round(step.value.progress * 100) });
      // Between two looks other jobs get their turn.
      await new Promise((resolve) => setImmediate(resolve));
    }
    step = run.next();
  }
  const outcome = step.value;
  await keep({
    ...emptyProof(source, outcome.holds ? 'holds' : 'fails'),
    progress: 100,
    proved: outcome.proved,
    tried: outcome.tried,
    failures: outcome.failures.map((failure) => failure.sentence),
  });
}
