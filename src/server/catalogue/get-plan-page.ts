import {
  Answer,
  Asset,
  Build,
  Correction,
  Imprint,
  Licence,
  LicenceOffer,
  Plan,
  Question,
  Revision,
} from '#db/models/index.ts';
import { defaultFit } from '#lib/plan/check-fit.ts';
import { publicFigures, type PublicFigures } from '#lib/plan/public-figures.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { CompiledPlan, Fit, FrontMatter, ResolvedProse, UnitSystem } from '#lib/plan/types.ts';
import { readFitQuery } from '#lib/plan/fit-query.ts';
import { allowedStretches, type Stretch } from '#lib/plan/allowed-stretches.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { refuse } from '../errors.ts';
import { requireFit } from '../licences/require-fit.ts';
import { getCompiledPlan } from '../publishing/get-compiled-plan.ts';
import { publicStory } from '../publishing/public-story.ts';

/** A visitor's sizes and what follows from them that may be known before paying. */
export interface PublicFit {
  fit: Fit;
  figures: PublicFigures;
  /** For each size the stretches of its range that a requirement excludes, with the sentence that says why. */
  stretches: Record<string, Stretch[]>;
  /** Form fields that could not be taken, each with its sentence; the fit has the default there. */
  refused: Record<string, string>;
}

export interface PlanPage {
  id: string;
  slug: string;
  front: FrontMatter;
  story: ResolvedProse;
  imprint: { slug: string; name: string; about: string };
  revision: { letter: string; publishedAt: string };
  revisions: { letter: string; publishedAt: string; notes: string }[];
  corrections: { letter: string; fixedIn: string | null; summary: string }[];
  cover: { sha256: string; width: number; height: number } | null;
  pictures: Record<string, { sha256: string; width: number; height: number }>;
  offers: {
    id: string;
    kind: 'personal' | 'workshop';
    priceMinor: number;
    currency: string;
    pieces: number | null;
  }[];
  public: PublicFit;
  /** The actor's own licences for this plan, where there are any. */
  owned: { licenceId: string; kind: 'personal' | 'workshop' }[];
  questions: {
    id: string;
    by: string;
    body: string;
    at: string;
    answers: { by: string; isImprint: boolean; body: string; at: string }[];
  }[];
  builds: { id: string; by: string; body: string; verdict: number; at: string }[];
}

/** What a visitor may see at a fit that the plan allows. */
function lookAt(plan: CompiledPlan, fit: Fit, refused: Record<string, string>): PublicFit {
  const figures = publicFigures(resolvePlan(plan, fit));
  const stretches: Record<string, Stretch[]> = {};
  for (const size of figures.sizes) stretches[size.name] = allowedStretches(plan, fit, size.name);
  return { fit, figures, stretches, refused };
}

/**
 * Works out what a visitor may see at the sizes in an address. Nothing else of the plan leaves this function: no part, position, formula, step or layout.
 */
export function fitFromQuery(
  plan: CompiledPlan,
  query: Readonly<Record<string, string>>,
  units: UnitSystem,
): PublicFit {
  const read = readFitQuery(plan, query, units);
  const filled = { ...read.fit, values: { ...defaultFit(plan, units).values, ...read.fit.values } };
  return lookAt(plan, filled, read.refused);
}

/** The same for a fit that an island sends. @throws BAD_INPUT naming the sizes at fault */
export async function fitForVisitor(revisionId: string, input: unknown): Promise<PublicFit> {
  const fit = await requireFit(revisionId, input);
  const plan = await getCompiledPlan(revisionId);
  return lookAt(plan, fit, {});
}

/** Finds a published plan's revision for the fit endpoint. @throws NOT_FOUND */
export async function getPublicRevision(actor: Actor, slug: string): Promise<string> {
  const plan = await Plan.findOne({
    where: { slug },
    attributes: ['id', 'imprintId', 'state', 'currentRevisionId'],
  });
  if (!plan?.currentRevisionId) return refuse('NOT_FOUND');
  requireMay(actor, 'plan:read-public', { planId: plan.id, imprintId: plan.imprintId, state: plan.state });
  return plan.currentRevisionId;
}

const pictureOf = ({ sha256, width, height }: Asset) => ({ sha256, width, height });

/**
 * The page of a published plan, at the visitor's sizes.
 * @param query the page's address, with sizes as `readFitQuery` reads them
 * @throws NOT_FOUND when there is no such plan for this person
 */
export async function getPlanPage(options: {
  actor: Actor;
  slug: string;
  query: Readonly<Record<string, string>>;
  units: UnitSystem;
}): Promise<PlanPage> {
  const { actor, slug } = options;
  const plan = await Plan.findOne({
    where: { slug },
    include: [
      { model: Imprint, as: 'imprint' },
      { model: LicenceOffer, as: 'offers', where: { isActive: true }, required: false },
    ],
  });
  if (!plan?.currentRevisionId || !plan.imprint) return refuse('NOT_FOUND');
  const licences =
    actor.kind === 'user'
      ? await Licence.findAll({
          where: { planId: plan.id, userId: actor.id, state: 'active' },
          attributes: ['id', 'kind', 'userId', 'state'],
        })
      : [];
  requireMay(actor, 'plan:read-public', {
    planId: plan.id,
    imprintId: plan.imprintId,
    state: plan.state,
    licences,
  });
  const compiled = await getCompiledPlan(plan.currentRevisionId);
  const [assets, revisions, corrections, questions, builds] = await Promise.all([
    Asset.findAll({ where: { revisionId: plan.currentRevisionId, isPublic: true } }),
    Revision.findAll({
      where: { planId: plan.id, state: ['published', 'superseded'] },
      attributes: ['id', 'letter', 'publishedAt', 'notes'],
      order: [['publishedAt', 'DESC']],
      limit: 30,
    }),
    Correction.findAll({ where: { planId: plan.id }, order: [['createdAt', 'DESC']], limit: 30 }),
    Question.findAll({
      where: { planId: plan.id, state: 'shown' },
      include: [{ model: Answer, as: 'answers', separate: true, order: [['createdAt', 'ASC']] }],
      order: [['createdAt', 'DESC']],
      limit: 20,
    }),
    Build.findAll({ where: { planId: plan.id, state: 'shown' }, order: [['createdAt', 'DESC']], limit: 20 }),
  ]);
  const letterOf = (id: string | null) => revisions.find((revision) => revision.id === id)?.letter ?? null;
  const current = revisions.find((revision) => revision.id === plan.currentRevisionId);
  const cover = assets.find((asset) => asset.name === compiled.front.cover);
  return {
    id: plan.id,
    slug: plan.slug,
    front: compiled.front,
    story: publicStory(compiled),
    imprint: { slug: plan.imprint.slug, name: plan.imprint.name, about: plan.imprint.about },
    revision: { letter: current?.letter ?? '', publishedAt: current?.publishedAt?.toISOString() ?? '' },
    revisions: revisions.map((revision) => ({
      letter: revision.letter ?? '',
      publishedAt: revision.publishedAt?.toISOString() ?? '',
      notes: revision.notes,
    })),
    corrections: corrections.map((correction) => ({
      letter: letterOf(correction.revisionId) ?? '',
      fixedIn: letterOf(correction.fixedRevisionId),
      summary: correction.summary,
    })),
    cover: cover ? pictureOf(cover) : null,
    pictures: Object.fromEntries(assets.map((asset) => [asset.name, pictureOf(asset)])),
    offers: (plan.offers ?? []).map(({ id, kind, priceMinor, currency, pieces }) => ({
      id,
      kind,
      priceMinor,
      currency,
      pieces,
    })),
    public: fitFromQuery(compiled, options.query, options.units),
    owned: licences.map((licence) => ({ licenceId: licence.id, kind: licence.kind })),
    questions: questions.map((question) => ({
      id: question.id,
      by: question.authorName,
      body: question.body,
      at: question.createdAt.toISOString(),
      answers: (question.answers ?? []).map((answer) => ({
        by: answer.authorName,
        isImprint: answer.isImprint,
        body: answer.body,
        at: answer.createdAt.toISOString(),
      })),
    })),
    builds: builds.map((build) => ({
      id: build.id,
      by: build.authorName,
      body: build.body,
      verdict: build.verdict,
      at: build.createdAt.toISOString(),
    })),
  };
}
