import { createHash } from 'node:crypto';
import {
  CreateBucketCommand,
  DeleteObjectCommand,
  GetObjectCommand,
  HeadBucketCommand,
  NoSuchKey,
  NotFound,
  PutObjectCommand,
  S3Client,
} from '@aws-sdk/client-s3';
import { getSignedUrl } from '@aws-sdk/s3-request-presigner';
import { env } from '../env.ts';

const client = new S3Client({
  region: env.S3_REGION,
  ...(env.S3_ENDPOINT ? { endpoint: env.S3_ENDPOINT, forcePathStyle: true } : {}),
  credentials: { accessKeyId: env.S3_ACCESS_KEY_ID, secretAccessKey: env.S3_SECRET_ACCESS_KEY },
  // With the SDK's newer default a store without trailer support keeps the trailer inside the file.
  requestChecksumCalculation: 'WHEN_REQUIRED',
  responseChecksumValidation: 'WHEN_REQUIRED',
  maxAttempts: 3,
  requestHandler: { connectionTimeout: 3_000, requestTimeout: 30_000 },
});

const Bucket = env.S3_BUCKET;

/** Five minutes: long enough to start a download, short enough that a passed-on link is worth little. */
export const DOWNLOAD_SECONDS = 300;

export interface StoredObject {
  key: string;
  sha256: string;
  bytes: number;
}

/** Makes the bucket where it is missing (local stores; a real one exists already). */
export async function ensureBucket(): Promise<void> {
  try {
    await client.send(new HeadBucketCommand({ Bucket }));
  } catch (error) {
    if (!(error instanceof NotFound)) throw error;
    await client.send(new CreateBucketCommand({ Bucket }));
  }
}

/** SHA-256 of some bytes, in hex. */
export function hashBytes(bytes: Uint8Array): string {
  return createHash('sha256').update(bytes).digest('hex');
}

/** Stores bytes under a key that the server made. Storing the same again is harmless. */
export async function putObject(key: string, body: Uint8Array, contentType: string): Promise<StoredObject> {
  const sha256 = hashBytes(body);
  await client.send(
    new PutObjectCommand({
      Bucket,
      Key: key,
      Body: body,
      ContentType: contentType,
      ContentLength: body.byteLength,
      Metadata: { sha256 },
    }),
  );
  return { key, sha256, bytes: body.byteLength };
}

/** The bytes under a key, or null when there are none. */
export async function findObject(key: string): Promise<Uint8Array | null> {
  try {
    const answer = await client.send(new GetObjectCommand({ Bucket, Key: key }));
    return answer.Body ? await answer.Body.transformToByteArray() : null;
  } catch (error) {
    if (error instanceof NoSuchKey || error instanceof NotFound) return null;
    throw error;
  }
}

/** Removes a key; no error when it is gone already. */
export async function deleteObject(key: string): Promise<void> {
  await client.send(new DeleteObjectCommand({ Bucket, Key: key }));
}

/** RFC 6266 attachment header: a plain ASCII name, and the real one encoded. */
export function attachmentHeader(fileName: string): string {
  const clean = fileName.replace(/[\p{Cc}\u202a-\u202e\u2066-\u2069"\\/]/gu, '').slice(0, 150) || 'file';
  const ascii =
    clean
      .normalize('NFKD')
      .replace(/[^\x20-\x7e]/g, '')
      .replace(/%/g, '') || 'file';
  const encoded = encodeURIComponent(clean).replace(
    /['()*]/g,
    (character) => `%${character.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${ascii}"; filename*=UTF-8''${encoded}`;
}

/**
 * A link that fetches one object for five minutes, as an attachment. Make it only after the licence was checked, on every request.
 */
export async function presignDownload(key: string, fileName: string, contentType: string): Promise<string> {
  return getSignedUrl(
    client,
    new GetObjectCommand({
      Bucket,
      Key: key,
      ResponseContentDisposition: attachmentHeader(fileName),
      ResponseContentType: contentType,
      ResponseCacheControl: 'private, no-store',
    }),
    { expiresIn: DOWNLOAD_SECONDS },
  );
}
