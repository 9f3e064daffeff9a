import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { GetObjectCommand, PutObjectCommand, CreateBucketCommand, S3Client } from '@aws-sdk/client-s3';
import { getSignedUrl } from '@aws-sdk/s3-request-presigner';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startObjectStore, type RunningObjectStore } from '#tests/fakes/object-store/start-object-store.ts';

const keys = { accessKeyId: 'shelf', secretAccessKey: 'a long secret of the store' };
const region = 'eu-central-1';
let store: RunningObjectStore;
let folder: string;
let client: S3Client;

const clientWith = (credentials: typeof keys) =>
  new S3Client({
    region,
    endpoint: store.url,
    forcePathStyle: true,
    credentials,
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  });

beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'benchleaf-store-'));
  store = await startObjectStore({ port: 0, folder, region, ...keys });
  client = clientWith(keys);
  await client.send(new CreateBucketCommand({ Bucket: 'copies' }));
  await client.send(
    new PutObjectCommand({
      Bucket: 'copies',
      Key: 'a/copy 1.pdf',
      Body: 'twenty-one characters',
      ContentType: 'application/pdf',
    }),
  );
});
afterAll(async () => {
  await store.close();
  await rm(folder, { recursive: true, force: true });
});

const command = () => new GetObjectCommand({ Bucket: 'copies', Key: 'a/copy 1.pdf' });
const sign = (seconds = 60, signingDate = new Date()) =>
  getSignedUrl(client, command(), { expiresIn: seconds, signingDate });

describe('the object store of the stand-ins', () => {
  it('gives what was stored to a client with the right keys', async () => {
    const answer = await client.send(command());
    expect(await answer.Body?.transformToString()).toBe('twenty-one characters');
  });

  it('gives it by a signed address, with the headers that the address asks for', async () => {
    const url = await getSignedUrl(
      client,
      new GetObjectCommand({
        Bucket: 'copies',
        Key: 'a/copy 1.pdf',
        ResponseContentDisposition: 'attachment; filename="x.pdf"',
      }),
      { expiresIn: 60 },
    );
    const answer = await fetch(url);
    expect(answer.status).toBe(200);
    expect(answer.headers.get('content-disposition')).toBe('attachment; filename="x.pdf"');
    expect(await answer.text()).toBe('twenty-one characters');
  });

  it('gives a range of it', async () => {
    const answer = await fetch(await sign(), { headers: { range: 'bytes=0-5' } });
    expect(answer.status).toBe(206);
    expect(await answer.text()).toBe('twenty');
  });

  it('refuses a request without a signature', async () => {
    const answer = await fetch(`${store.url}/copies/a/copy%201.pdf`);
    expect(answer.status).toBe(403);
    expect(await answer.text()).toContain('<Code>AccessDenied</Code>');
  });

  it('refuses a signed address that was changed to another key', async () => {
    const answer = await fetch((await sign()).replace('copy%201.pdf', 'copy%202.pdf'));
    expect(answer.status).toBe(403);
    expect(await answer.text()).toContain('<Code>SignatureDoesNotMatch</Code>');
  });

  it('refuses a signed address whose lifetime was stretched', async () => {
    const answer = await fetch((await sign(60)).replace('X-Amz-Expires=60', 'X-Amz-Expires=6000'));
    expect(await answer.text()).toContain('<Code>SignatureDoesNotMatch</Code>');
  });

  it('refuses a signed address by another method', async () => {
    const answer = await fetch(await sign(), { method: 'DELETE' });
    expect(answer.status).toBe(403);
    expect((await fetch(await sign())).status).toBe(200);
  });

  it('refuses a signed address that has run out', async () => {
    const answer = await fetch(await sign(60, new Date(Date.now() - 61_000)));
    expect(answer.status).toBe(403);
    expect(await answer.text()).toContain('Request has expired');
  });

  it('refuses a lifetime of more than seven days', async () => {
    const answer = await fetch((await sign(60)).replace('X-Amz-Expires=60', 'X-Amz-Expires=604801'));
    expect(answer.status).toBe(400);
  });

  it('refuses another secret and another key id', async () => {
    await expect(
      clientWith({ ...keys, secretAccessKey: 'a wrong one' }).send(command()),
    ).rejects.toMatchObject({ name: 'SignatureDoesNotMatch' });
    await expect(clientWith({ ...keys, accessKeyId: 'other' }).send(command())).rejects.toMatchObject({
      name: 'InvalidAccessKeyId',
    });
  });
});
