import sharp from 'sharp';
import type { Picture } from './find-picture.ts';

/** The widths that pages ask for; any other is refused, so that nobody can make the server scale at will. */
const WIDTHS = new Set(['480', '960', '1440']);
const MAX_KEPT = 60;
const kept = new Map<string, { bytes: Uint8Array; contentType: string }>();

/** The picture at one of the known widths as WebP, or as it is. A few lately used ones are kept in memory; any process can make them again. */
export async function resizePicture(
  picture: Picture,
  width: string | null,
): Promise<{ bytes: Uint8Array; contentType: string }> {
  if (!width || !WIDTHS.has(width)) return picture;
  const key = `${picture.sha256}:${width}`;
  const known = kept.get(key);
  if (known) return known;
  const bytes = await sharp(picture.bytes, { limitInputPixels: 40_000_000 })
    .resize({ width: Number(width), withoutEnlargement: true })
    .webp({ quality: 80 })
    .toBuffer();
  const scaled = { bytes, contentType: 'image/webp' };
  const oldest = kept.size >= MAX_KEPT ? kept.keys().next().value : undefined;
  if (oldest !== undefined) kept.delete(oldest);
  kept.set(key, scaled);
  return scaled;
}
