import { randomUUID } from 'node:crypto';
import sharp from 'sharp';
import { Asset, Revision } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { refuse } from '../errors.ts';
import { hashBytes, putObject } from '../storage/object-store.ts';
import { requireDraftPlan, type AssetView } from './get-draft.ts';

// Only what is needed may decode: a picture is judged by its content and never by its name.
sharp.block({ operation: ['VipsForeignLoad'] });
sharp.unblock({ operation: ['VipsForeignLoadJpeg', 'VipsForeignLoadPng', 'VipsForeignLoadWebp'] });

export const MAX_UPLOAD_BYTES = 12_000_000;
const MAX_PIXELS = 40_000_000;
const MAX_ASSETS = 80;
const LONGEST_SIDE = 2400;

const NAME = /^[A-Za-z0-9][A-Za-z0-9._-]{0,119}$/;

/** Decodes and encodes anew: what is stored is only the picture, without places, profiles or anything hidden behind it. */
async function clean(bytes: Uint8Array): Promise<{
  bytes: Uint8Array;
  type: 'image/jpeg' | 'image/png' | 'image/webp';
  width: number;
  height: number;
}> {
  try {
    const source = sharp(bytes, { limitInputPixels: MAX_PIXELS, failOn: 'error', pages: 1 });
    const { format } = await source.metadata();
    if (format !== 'jpeg' && format !== 'png' && format !== 'webp')
      throw new Error(`not a picture that we take: ${format ?? 'unknown'}`);
    const upright = source
      .rotate()
      .resize({ width: LONGEST_SIDE, height: LONGEST_SIDE, fit: 'inside', withoutEnlargement: true });
    const encoded =
      format === 'png' ? upright.png({ compressionLevel: 9 }) : upright.jpeg({ quality: 84, mozjpeg: true });
    const { data, info } = await encoded.toBuffer({ resolveWithObject: true });
    return {
      bytes: data,
      type: format === 'png' ? 'image/png' : 'image/jpeg',
      width: info.width,
      height: info.height,
    };
  } catch (cause) {
    const detail = 'This is not a JPEG, PNG or WebP picture of at most 40 megapixels. Nothing was kept.';
    return refuse('BAD_INPUT', { detail, fields: { file: detail }, cause });
  }
}

/**
 * Takes a picture for a draft under a name that the text uses; a second one of the same name replaces the first.
 * @throws BAD_INPUT for anything but a sound picture or an unusable name, TOO_LARGE, CONFLICT when the draft has too many
 */
export async function uploadAsset(upload: {
  actor: Actor;
  planId: string;
  name: string;
  bytes: Uint8Array;
}): Promise<AssetView> {
  await requireDraftPlan(upload.actor, upload.planId);
  if (upload.bytes.byteLength > MAX_UPLOAD_BYTES)
    refuse('TOO_LARGE', { detail: 'A picture may have 12 MB at most.' });
  const name = upload.name.replace(/^.*[\\/]/, '').replace(/\s+/g, '-');
  if (!NAME.test(name)) {
    refuse('BAD_INPUT', {
      fields: { file: "A picture's name has letters, digits, points and hyphens only, e.g. side-view.jpg." },
    });
  }
  const revision = await Revision.findOne({
    where: { planId: upload.planId, state: 'draft' },
    attributes: ['id'],
  });
  if (!revision) return refuse('CONFLICT', { detail: 'Open a draft first: a published revision is frozen.' });
  const existing = await Asset.findOne({ where: { revisionId: revision.id, name } });
  if (!existing && (await Asset.count({ where: { revisionId: revision.id } })) >= MAX_ASSETS) {
    refuse('CONFLICT', { detail: `A plan holds ${MAX_ASSETS} pictures at most. Remove one first.` });
  }
  const picture = await clean(upload.bytes);
  const sha256 = hashBytes(picture.bytes);
  const { key } = await putObject(`pictures/${sha256}`, picture.bytes, picture.type);
  const content = {
    contentType: picture.type,
    width: picture.width,
    height: picture.height,
    bytes: picture.bytes.byteLength,
    sha256,
    objectKey: key,
  };
  if (existing) await existing.update(content);
  else await Asset.create({ id: randomUUID(), revisionId: revision.id, name, ...content });
  return { name, sha256, width: picture.width, height: picture.height, bytes: content.bytes };
}

/** Takes a picture out of the draft; published revisions keep theirs. */
export async function removeAsset(actor: Actor, planId: string, name: string): Promise<void> {
  await requireDraftPlan(actor, planId);
  const revision = await Revision.findOne({ where: { planId, state: 'draft' }, attributes: ['id'] });
  if (revision) await Asset.destroy({ where: { revisionId: revision.id, name } });
}
