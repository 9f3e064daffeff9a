import { request as httpRequest, type IncomingHttpHeaders, type Server } from 'node:http';
import { connect, type AddressInfo } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createFront } from '#server/front/create-front.ts';

/** What came through to the handler behind the front, last. */
let passed: { url: string; headers: IncomingHttpHeaders; bytes: number } | null = null;
let server: Server;
let port: number;
let isWell = true;

beforeAll(async () => {
  server = createFront({
    host: 'benchleaf.test',
    origin: 'https://benchleaf.test',
    trustedProxies: [],
    formTargets: ['https://pay.test'],
    checkHealth: () => (isWell ? Promise.resolve() : new Promise(() => undefined)),
    log: { info: () => undefined, error: () => undefined },
    handler: (request, response) => {
      let bytes = 0;
      request.on('data', (chunk: Buffer) => (bytes += chunk.length));
      request.on('end', () => {
        passed = { url: request.url ?? '', headers: request.headers, bytes };
        response.writeHead(200, { 'content-type': 'text/html' });
        response.end('through');
      });
      request.on('error', () => undefined);
    },
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  port = (server.address() as AddressInfo).port;
});
afterAll(async () => {
  server.closeAllConnections();
  await new Promise((resolve) => server.close(resolve));
});

interface Answer {
  status: number;
  headers: IncomingHttpHeaders;
}

function send(
  path: string,
  options: { method?: string; headers?: Record<string, string | string[]>; body?: string | Buffer } = {},
): Promise<Answer> {
  passed = null;
  return new Promise((resolve, reject) => {
    const request = httpRequest(
      {
        host: '127.0.0.1',
        port,
        path,
        method: options.method ?? 'GET',
        headers: { host: 'benchleaf.test', ...options.headers },
      },
      (response) => {
        response.resume();
        response.on('end', () => {
          resolve({ status: response.statusCode ?? 0, headers: response.headers });
        });
      },
    );
    request.on('error', reject);
    request.end(options.body);
  });
}

/** Sends bytes as they are and gives the status line's number. */
function sendRaw(text: string): Promise<number> {
  return new Promise((resolve, reject) => {
    const socket = connect(port, '127.0.0.1', () => socket.write(text));
    socket.once('data', (chunk) => {
      resolve(Number(/HTTP\/1\.1 (\d+)/.exec(chunk.toString())?.[1] ?? 0));
      socket.destroy();
    });
    socket.once('error', reject);
  });
}

const own = { origin: 'https://benchleaf.test' };

describe('a path', () => {
  const crooked = ['account', 'office', 'staff', 'drawer/x', 'api/staff/refunds'].flatMap((path) => [
    `//${path}`,
    `/\\${path}`,
    `/%2561${path}`,
    `/x%2f${path}`,
    `/x%5c${path}`,
    `/${path}%00`,
    `/${path};x`,
    `/./${path}`,
    `/../${path}`,
    `/%2e%2e/${path}`,
  ]);
  it.each(crooked)('%s is turned away', async (path) => {
    expect((await send(path)).status).toBe(400);
    expect(passed).toBeNull();
  });

  it.each(['/_server-islands/x', '/_image?href=/x', '/_actions/x', '/_Server-Islands/x'])(
    '%s is not there',
    async (path) => {
      expect((await send(path)).status).toBe(404);
      expect(passed).toBeNull();
    },
  );

  it('in its plain form goes through', async () => {
    expect((await send('/plans/boot-bench?units=in')).status).toBe(200);
    expect(passed).toMatchObject({ url: '/plans/boot-bench?units=in' });
  });

  it('of ten thousand query keys or of six thousand characters is turned away', async () => {
    expect(
      (await send(`/plans?${Array.from({ length: 200 }, (_, key) => `k${String(key)}=1`).join('&')}`)).status,
    ).toBe(400);
    expect((await send(`/${'a'.repeat(6000)}`)).status).toBe(431);
  });
});

describe('a host', () => {
  it('that is not ours is told so', async () => {
    expect((await send('/', { headers: { host: 'evil.test' } })).status).toBe(421);
    expect((await send('/', { headers: { host: 'benchleaf.test:8080' } })).status).toBe(421);
  });

  it('named twice, or in the address itself, is turned away', async () => {
    expect(
      await sendRaw('GET / HTTP/1.1\r\nHost: benchleaf.test\r\nHost: evil.test\r\n\r\n'),
    ).toBeGreaterThanOrEqual(400);
    expect(await sendRaw('GET http://evil.test/ HTTP/1.1\r\nHost: benchleaf.test\r\n\r\n')).toBe(400);
  });
});

describe('a request that changes something', () => {
  const types = [
    'application/x-www-form-urlencoded',
    'multipart/form-data; boundary=x',
    'text/plain',
    'application/json',
    null,
  ];
  const origins = [
    ['own', 'https://benchleaf.test', true],
    ['foreign', 'https://evil.test', false],
    ['null', 'null', false],
    ['missing', null, false],
  ] as const;
  const sites = [
    ['same-origin', true],
    ['cross-site', false],
    ['same-site', false],
    [null, true],
  ] as const;
  const matrix = types.flatMap((type) =>
    origins.flatMap(([name, origin, isOwn]) =>
      sites.map(([site, isFine]) => [type, name, site, origin, isOwn && isFine] as const),
    ),
  );

  it.each(matrix)('of type %s, origin %s, fetch site %s', async (type, _, site, origin, isLetThrough) => {
    const headers = {
      ...(type ? { 'content-type': type } : {}),
      ...(origin ? { origin } : {}),
      ...(site ? { 'sec-fetch-site': site } : {}),
    };
    expect((await send('/api/checkout', { method: 'POST', headers, body: 'a=1' })).status).toBe(
      isLetThrough ? 200 : 403,
    );
  });

  it('needs no origin at the webhook alone, which trusts a signature', async () => {
    expect((await send('/api/webhooks/payments', { method: 'POST', body: '{}' })).status).toBe(200);
    expect((await send('/api/webhooks/payments/', { method: 'POST', body: '{}' })).status).toBe(403);
  });

  it.each(['TRACE', 'OPTIONS', 'PATCH', 'PROPFIND'])('by %s is not known', async (method) => {
    expect((await send('/plans', { method, headers: own })).status).toBe(405);
  });
});

describe('a body', () => {
  it('that says it is too large is refused before it is read', async () => {
    expect(
      (await send('/api/checkout', { method: 'POST', headers: { ...own, 'content-length': '45000000' } }))
        .status,
    ).toBe(413);
  });

  it('that does not say its size is cut off when it grows too large', async () => {
    const outcome = await new Promise<number | string>((resolve) => {
      const request = httpRequest(
        {
          host: '127.0.0.1',
          port,
          path: '/api/checkout',
          method: 'POST',
          headers: { host: 'benchleaf.test', ...own, 'transfer-encoding': 'chunked' },
        },
        (response) => {
          resolve(response.statusCode ?? 0);
        },
      );
      request.on('error', () => {
        resolve('cut');
      });
      const chunk = Buffer.alloc(60_000);
      const write = (left: number) => {
        if (left > 0 && !request.destroyed) request.write(chunk, () => setImmediate(write, left - 1));
        else if (!request.destroyed) request.end();
      };
      write(40);
    });
    expect([413, 'cut']).toContain(outcome);
    expect(passed).toBeNull();
  });

  it('of a picture may be larger than that of a form', async () => {
    const body = Buffer.alloc(1_000_000);
    expect((await send('/api/office/plans/x/pictures', { method: 'POST', headers: own, body })).status).toBe(
      200,
    );
    expect(passed).toMatchObject({ bytes: 1_000_000 });
    expect((await send('/api/office/plans/x/publish', { method: 'POST', headers: own, body })).status).toBe(
      413,
    );
  });
});

describe('the client’s address', () => {
  it('is the socket’s, whatever the client says of itself', async () => {
    await send('/', {
      headers: {
        'x-forwarded-for': '6.6.6.6',
        'x-benchleaf-client': '6.6.6.6',
        'x-forwarded-proto': 'https',
        forwarded: 'for=6.6.6.6',
      },
    });
    expect(passed?.headers['x-benchleaf-client']).toBe('127.0.0.1');
    for (const name of ['x-forwarded-for', 'x-forwarded-proto', 'forwarded'])
      expect(passed?.headers[name]).toBeUndefined();
  });
});

describe('every answer', () => {
  it.each([
    ['a page', '/', 'GET'],
    ['a refusal', '//x', 'GET'],
    ['what is not there', '/_image', 'GET'],
    ['a wrong method', '/', 'PATCH'],
  ])('carries the security headers: %s', async (_, path, method) => {
    const { headers } = await send(path, { method, headers: own });
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['strict-transport-security']).toContain('max-age');
    expect(headers['content-security-policy']).toContain("frame-ancestors 'none'");
    expect(headers['referrer-policy']).toBeDefined();
    expect(headers['cross-origin-opener-policy']).toBe('same-origin');
    expect(headers['x-request-id']).toMatch(/^[0-9a-f-]{36}$/);
  });
});

describe('the health of the site', () => {
  it('is well while the database answers, and ill within three seconds when it hangs', async () => {
    expect((await send('/healthz')).status).toBe(200);
    isWell = false;
    expect((await send('/healthz')).status).toBe(503);
    isWell = true;
  });
});
