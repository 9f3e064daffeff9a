import sharp from 'sharp';
import { describe, expect, it } from 'vitest';
import { Asset, Imprint, ImprintMember, Plan, Revision } from '#db/models/index.ts';
import { createPlan } from '#server/publishing/create-plan.ts';
import { getDraft, letterAfter, startDraft } from '#server/publishing/get-draft.ts';
import { proveRevision } from '#server/publishing/prove-revision.ts';
import { listPublishChecks, publishRevision } from '#server/publishing/publish-revision.ts';
import { saveDraft } from '#server/publishing/save-draft.ts';
import { setPrices } from '#server/publishing/set-prices.ts';
import { uploadAsset } from '#server/publishing/upload-asset.ts';
import { ensureBucket, findObject } from '#server/storage/object-store.ts';
import { actAs, codeOf, makePerson, makeWord } from './people.ts';

async function makeDraft() {
  const owner = await makePerson();
  const imprint = await Imprint.create({
    slug: `imprint-${makeWord()}`,
    name: `Imprint ${makeWord()}`,
    state: 'active',
  });
  await ImprintMember.create({ imprintId: imprint.id, userId: owner.id, role: 'owner' });
  const actor = await actAs(owner);
  const { planId } = await createPlan({ actor, imprintId: imprint.id, title: `Rack ${makeWord()}` });
  const draft = await Revision.findOne({ where: { planId, state: 'draft' }, rejectOnEmpty: true });
  return { actor, planId, draft };
}

async function publish({ actor, planId }: Pick<Awaited<ReturnType<typeof makeDraft>>, 'actor' | 'planId'>) {
  const draft = await Revision.findOne({ where: { planId, state: 'draft' }, rejectOnEmpty: true });
  await proveRevision(draft.id);
  await draft.reload();
  return publishRevision({ actor, planId, version: draft.version, notes: 'changed' });
}

const price = [{ kind: 'personal', currency: 'EUR', priceMinor: 900, pieces: null }] as const;

describe('a draft', () => {
  it('saved by two editors from the same version keeps the first and tells the second', async () => {
    const { actor, planId, draft } = await makeDraft();
    await saveDraft({ actor, planId, source: `${draft.source}\nfirst`, version: draft.version });
    expect(await codeOf(saveDraft({ actor, planId, source: 'second', version: draft.version }))).toBe(
      'CONFLICT',
    );
    expect((await draft.reload()).source).toMatch(/first$/);
  });

  it('is nobody’s to see or save but the imprint’s', async () => {
    const { planId, draft } = await makeDraft();
    const stranger = await actAs(await makePerson());
    expect(await codeOf(getDraft(stranger, planId))).toBe('NOT_FOUND');
    expect(await codeOf(saveDraft({ actor: stranger, planId, source: 'x', version: draft.version }))).toBe(
      'NOT_FOUND',
    );
  });
});

describe('publishing', () => {
  it('names what stands in the way, and goes when all is mended', async () => {
    const made = await makeDraft();
    const open = (await listPublishChecks(made.actor, made.planId))
      .filter((check) => !check.holds)
      .map((check) => check.name);
    expect(open).toEqual(['proof', 'price']);
    expect(await codeOf(publishRevision({ ...made, version: made.draft.version, notes: '' }))).toBe(
      'PLAN_HAS_PROBLEMS',
    );
    await setPrices({ actor: made.actor, planId: made.planId, prices: [...price] });
    expect(await publish(made)).toEqual({ letter: 'A' });
    expect((await Plan.findByPk(made.planId))?.state).toBe('published');
  });

  it('does not take a proof of an earlier text', async () => {
    const made = await makeDraft();
    await setPrices({ actor: made.actor, planId: made.planId, prices: [...price] });
    await proveRevision(made.draft.id);
    await saveDraft({
      actor: made.actor,
      planId: made.planId,
      source: `${made.draft.source}\nA word more.\n`,
      version: made.draft.version,
    });
    expect(
      (await listPublishChecks(made.actor, made.planId)).find((check) => check.name === 'proof')?.holds,
    ).toBe(false);
  });

  it('letters the next revision B, supersedes A, and leaves A frozen in the database', async () => {
    const made = await makeDraft();
    await setPrices({ actor: made.actor, planId: made.planId, prices: [...price] });
    await publish(made);
    await startDraft(made.actor, made.planId);
    expect(await publish(made)).toEqual({ letter: 'B' });
    const first = await Revision.findOne({
      where: { planId: made.planId, letter: 'A' },
      rejectOnEmpty: true,
    });
    expect(first.state).toBe('superseded');
    await expect(first.update({ source: 'another text' })).rejects.toThrow('frozen');
  });

  it('by two people at once gives one revision and tells the other', async () => {
    const made = await makeDraft();
    await setPrices({ actor: made.actor, planId: made.planId, prices: [...price] });
    await proveRevision(made.draft.id);
    const { version } = await made.draft.reload();
    const outcomes = await Promise.allSettled(
      [1, 2].map(() => publishRevision({ actor: made.actor, planId: made.planId, version, notes: '' })),
    );
    expect(outcomes.map((outcome) => outcome.status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it.each([
    [null, 'A'],
    ['A', 'B'],
    ['Z', 'AA'],
    ['AZ', 'BA'],
  ])('comes after %s with %s', (letter, next) => {
    expect(letterAfter(letter)).toBe(next);
  });
});

describe('a picture', () => {
  const svg = Buffer.from(
    '<svg xmlns="http://www.w3.org/2000/svg" width="9" height="9"><script>alert(1)</script></svg>',
  );
  const flat = (width: number, height: number) =>
    sharp({ create: { width, height, channels: 3, background: '#d9ae14' } });

  it('is stored anew without where and when it was taken', async () => {
    await ensureBucket();
    const { actor, planId, draft } = await makeDraft();
    const bytes = await flat(60, 40)
      .withExif({
        IFD0: { Copyright: 'somebody' },
        IFD3: { GPSLatitude: '51/1 30/1 0/1', GPSLatitudeRef: 'N' },
      })
      .jpeg()
      .toBuffer();
    expect((await sharp(bytes).metadata()).exif).toBeDefined();
    await uploadAsset({ actor, planId, name: 'side view.jpg', bytes });
    const asset = await Asset.findOne({
      where: { revisionId: draft.id, name: 'side-view.jpg' },
      rejectOnEmpty: true,
    });
    const stored = await findObject(asset.objectKey);
    expect((await sharp(stored ?? Buffer.alloc(0)).metadata()).exif).toBeUndefined();
  });

  it.each([
    ['a drawing that holds a script', () => Promise.resolve(svg)],
    ['a GIF', () => flat(9, 9).gif().toBuffer()],
    ['an AVIF', () => flat(9, 9).avif().toBuffer()],
    ['a PDF', () => Promise.resolve(Buffer.from('%PDF-1.4\n%%EOF'))],
    ['a picture of 256 megapixels', () => flat(16_000, 16_000).png().toBuffer()],
    ['nothing', () => Promise.resolve(Buffer.alloc(0))],
  ])('that is really %s is refused, whatever its name says', async (_, make) => {
    const { actor, planId } = await makeDraft();
    expect(await codeOf(uploadAsset({ actor, planId, name: 'cover.png', bytes: await make() }))).toBe(
      'BAD_INPUT',
    );
    expect(await Asset.count({ include: [{ association: 'revision', where: { planId } }] })).toBe(0);
  });

  it.each(['a"\r\nSet-Cookie: x.png', 'a\u202egnp.exe', `${'a'.repeat(5000)}.png`, '.htaccess'])(
    'named %j is refused',
    async (name) => {
      const { actor, planId } = await makeDraft();
      expect(
        await codeOf(uploadAsset({ actor, planId, name, bytes: await flat(9, 9).png().toBuffer() })),
      ).toBe('BAD_INPUT');
    },
  );

  it('named with a path keeps only the name', async () => {
    await ensureBucket();
    const { actor, planId } = await makeDraft();
    expect(
      (
        await uploadAsset({
          actor,
          planId,
          name: '../../etc/leg.png',
          bytes: await flat(9, 9).png().toBuffer(),
        })
      ).name,
    ).toBe('leg.png');
  });
});
