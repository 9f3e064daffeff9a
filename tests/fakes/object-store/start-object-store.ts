import { createHash } from 'node:crypto';
import { mkdir } from 'node:fs/promises';
import { createServer, request as forward, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import S3rver from 's3rver';
import { verifySignature, type Keys } from './verify-signature.ts';

export interface ObjectStoreOptions extends Keys {
  /** Port of the verifying proxy; 0 for any free one. */
  port: number;
  folder: string;
  region: string;
}

export interface RunningObjectStore {
  url: string;
  port: number;
  close(): Promise<void>;
}

/** The only key that s3rver knows; it is never told to anybody outside this process. */
const INNER_KEY = 'S3RVER';

function refuse(response: ServerResponse, status: number, code: string, message: string): void {
  response.writeHead(status, { 'content-type': 'application/xml' });
  response.end(
    `<?xml version="1.0" encoding="UTF-8"?>\n<Error><Code>${code}</Code><Message>${message}</Message></Error>`,
  );
}

async function readAll(request: IncomingMessage): Promise<Buffer> {
  const chunks: Buffer[] = [];
  for await (const chunk of request) chunks.push(Buffer.from(chunk as Uint8Array));
  return Buffer.concat(chunks);
}

/** The address as s3rver may see it: without the signature, which it would only half check. */
function plainUrl(rawUrl: string): string {
  const [path = '/', rawQuery = ''] = rawUrl.split('?', 2);
  const kept = rawQuery.split('&').filter((pair) => pair && !/^X-Amz-/i.test(pair));
  return kept.length ? `${path}?${kept.join('&')}` : path;
}

/**
 * The object store of the local stand-ins: s3rver on a loopback port of its own, and before it a proxy that checks the signature of every request, since s3rver
 * checks none. What the proxy lets through it hands on without a signature, under a key of its own.
 */
export async function startObjectStore(options: ObjectStoreOptions): Promise<RunningObjectStore> {
  await mkdir(options.folder, { recursive: true });
  const inner = new S3rver({
    address: '127.0.0.1',
    port: 0,
    directory: options.folder,
    silent: true,
    allowMismatchedSignatures: true,
  });
  const { port: innerPort } = await inner.run();

  const server = createServer((request, response) => {
    void handle(request, response).catch(() => {
      if (!response.headersSent) refuse(response, 500, 'InternalError', 'The store failed.');
    });
  });

  async function handle(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const rawUrl = request.url ?? '/';
    const headers = Object.fromEntries(
      Object.entries(request.headers).map(([name, value]) => [
        name,
        Array.isArray(value) ? value.join(',') : (value ?? ''),
      ]),
    );
    const found = verifySignature(
      { method: request.method ?? 'GET', rawUrl, headers },
      options,
      options.region,
      Date.now(),
    );
    if (found) {
      refuse(response, found.status, found.code, found.message);
      return;
    }
    const body = await readAll(request);
    const declared = headers['x-amz-content-sha256'];
    if (
      declared &&
      /^[0-9a-f]{64}$/.test(declared) &&
      createHash('sha256').update(body).digest('hex') !== declared
    ) {
      refuse(
        response,
        400,
        'XAmzContentSHA256Mismatch',
        'The provided x-amz-content-sha256 header does not match what was computed.',
      );
      return;
    }
    const passed = Object.fromEntries(
      Object.entries(headers).filter(
        ([name]) =>
          ![
            'authorization',
            'x-amz-date',
            'x-amz-content-sha256',
            'x-amz-security-token',
            'date',
            'host',
            'connection',
            'transfer-encoding',
            'expect',
          ].includes(name),
      ),
    );
    const answer = forward(
      {
        host: '127.0.0.1',
        port: innerPort,
        method: request.method,
        path: plainUrl(rawUrl),
        headers: {
          ...passed,
          'content-length': String(body.byteLength),
          date: new Date().toUTCString(),
          authorization: `AWS ${INNER_KEY}:none`,
        },
      },
      (stored) => {
        response.writeHead(stored.statusCode ?? 502, stored.headers);
        stored.pipe(response);
      },
    );
    answer.on('error', () => {
      if (!response.headersSent) refuse(response, 503, 'ServiceUnavailable', 'The store does not answer.');
    });
    answer.end(body);
  }

  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(options.port, '127.0.0.1', resolve);
  });
  const { port } = server.address() as AddressInfo;
  return {
    url: `http://127.0.0.1:${port}`,
    port,
    close: async () => {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      await inner.close();
    },
  };
}
