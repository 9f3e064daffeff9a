import { Asset, Book, Copy, Imprint, Licence, Plan, Revision } from '#db/models/index.ts';
import { setBook } from '#lib/book/set-book.ts';
import type { BookPicture } from '#lib/book/types.ts';
import { stampBook } from '#lib/book/stamp-book.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import { log } from '../log.ts';
import { getCompiledPlan } from '../publishing/get-compiled-plan.ts';
import { findObject, hashBytes, putObject } from '../storage/object-store.ts';
import { loadBookFonts } from './fonts.ts';

const PDF = 'application/pdf';
const day = (date: Date) => date.toISOString().slice(0, 10);

async function tell(copyId: string, progress: number, stage: string): Promise<void> {
  await Copy.update({ progress, stage, state: 'making' }, { where: { id: copyId } });
}

/** Fetches an object and believes it only when its hash is the one that was kept. */
async function findSound(objectKey: string, sha256: string): Promise<Uint8Array | null> {
  const bytes = await findObject(objectKey);
  if (bytes && hashBytes(bytes) === sha256) return bytes;
  if (bytes) log.error({ objectKey }, 'a stored file is not what was stored; it is made again');
  return null;
}

async function loadPictures(revisionId: string): Promise<Map<string, BookPicture>> {
  const assets = await Asset.findAll({ where: { revisionId } });
  const pictures = new Map<string, BookPicture>();
  for (const asset of assets) {
    const bytes = await findObject(asset.objectKey);
    if (bytes)
      pictures.set(asset.name, { bytes, type: asset.contentType, width: asset.width, height: asset.height });
  }
  return pictures;
}

type FullCopy = Copy & { revision: Revision; licence: Licence & { plan: Plan & { imprint: Imprint } } };

async function getCopy(copyId: string): Promise<FullCopy | null> {
  const copy = await Copy.findByPk(copyId, {
    include: [
      { model: Revision, as: 'revision', attributes: ['id', 'letter', 'publishedAt', 'planId'] },
      {
        model: Licence,
        as: 'licence',
        include: [{ model: Plan, as: 'plan', include: [{ model: Imprint, as: 'imprint' }] }],
      },
    ],
  });
  const isFull = (row: Copy | null): row is FullCopy => Boolean(row?.revision && row.licence?.plan?.imprint);
  return isFull(copy) ? copy : null;
}

/** The unstamped book of a copy: the kept one where it is sound, otherwise set anew and kept. */
async function findOrSetBook(copy: FullCopy): Promise<{ bytes: Uint8Array; pages: number }> {
  const kept = await Book.findByPk(copy.contentKey);
  const sound = kept && (await findSound(kept.objectKey, kept.sha256));
  if (kept && sound) return { bytes: sound, pages: kept.pages };

  const compiled = await getCompiledPlan(copy.revisionId);
  const resolved = resolvePlan(compiled, copy.fit);
  await tell(copy.id, 15, 'fetching the pictures');
  const pictures = await loadPictures(copy.revisionId);
  const history = await Revision.findAll({
    where: { planId: copy.revision.planId, state: ['published', 'superseded'] },
    attributes: ['letter', 'publishedAt', 'notes'],
    order: [['publishedAt', 'ASC']],
  });
  await tell(copy.id, 30, 'setting the pages');
  const book = await setBook({
    resolved,
    front: compiled.front,
    imprint: copy.licence.plan.imprint.name,
    planNumber: copy.licence.plan.slug,
    revision: { letter: copy.revision.letter ?? '', date: day(copy.revision.publishedAt ?? new Date()) },
    paper: copy.paper,
    fonts: await loadBookFonts(),
    pictures,
    history: history.map((revision) => ({
      letter: revision.letter ?? '',
      date: day(revision.publishedAt ?? new Date()),
      notes: revision.notes,
    })),
  });
  await tell(copy.id, 70, 'keeping the book');
  const stored = await putObject(`books/${copy.contentKey}.pdf`, book.bytes, PDF);
  await Book.upsert({
    contentKey: copy.contentKey,
    objectKey: stored.key,
    sha256: stored.sha256,
    bytes: stored.bytes,
    pages: book.pages,
  });
  return book;
}

/**
 * Makes one copy: sets the book at its fit, or takes the kept one, stamps it for its licence and stores it. May run any number of
 * times: a ready copy whose file is sound is left alone, a lost or damaged one is made again.
 * @throws when the store or the database fails, so that the job is tried again
 */
export async function makeCopy(copyId: string): Promise<void> {
  const copy = await getCopy(copyId);
  if (!copy) return;
  if (
    copy.state === 'ready' &&
    copy.objectKey &&
    copy.sha256 &&
    (await findSound(copy.objectKey, copy.sha256))
  )
    return;
  try {
    await tell(copyId, 5, 'working out the sizes');
    const book = await findOrSetBook(copy);
    await tell(copyId, 80, 'stamping your name');
    const stamped = await stampBook({
      book: book.bytes,
      holderName: copy.licence.holderName,
      copyNumber: copy.number,
      planTitle: copy.licence.plan.title,
      revisionLetter: copy.revision.letter ?? '',
      date: day(copy.createdAt),
      fonts: await loadBookFonts(),
    });
    await tell(copyId, 90, 'storing the copy');
    const stored = await putObject(`copies/${copy.id}.pdf`, stamped, PDF);
    await copy.update({
      state: 'ready',
      progress: 100,
      stage: 'ready',
      failure: null,
      objectKey: stored.key,
      sha256: stored.sha256,
      bytes: stored.bytes,
      pages: book.pages,
      readyAt: new Date(),
    });
  } catch (error) {
    log.error({ copyId, err: error }, 'a copy could not be made');
    await copy.update({
      state: 'failed',
      stage: 'stopped',
      failure: 'The copy could not be made. It is tried again by itself.',
    });
    throw error;
  }
}
