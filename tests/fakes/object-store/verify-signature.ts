import { createHash, createHmac, timingSafeEqual } from 'node:crypto';

/** A request as the proxy got it: the method, the raw path and query, and headers in lower case. */
export interface SignedRequest {
  method: string;
  rawUrl: string;
  headers: Readonly<Record<string, string>>;
}

export interface Keys {
  accessKeyId: string;
  secretAccessKey: string;
}

/** What is wrong with a signature, under the published error codes. */
export interface SignatureFault {
  status: 400 | 403;
  code:
    | 'AccessDenied'
    | 'SignatureDoesNotMatch'
    | 'InvalidAccessKeyId'
    | 'RequestTimeTooSkewed'
    | 'AuthorizationQueryParametersError';
  message: string;
}

const ALGORITHM = 'AWS4-HMAC-SHA256';
const SKEW_MS = 15 * 60_000;
const MAX_EXPIRY_SECONDS = 7 * 86_400;

const fault = (code: SignatureFault['code'], message: string): SignatureFault => ({
  status: code === 'AuthorizationQueryParametersError' ? 400 : 403,
  code,
  message,
});
const hmac = (key: Buffer | string, text: string) => createHmac('sha256', key).update(text).digest();
const sha256 = (text: string) => createHash('sha256').update(text).digest('hex');

/** RFC 3986 encoding as signature version 4 wants it. */
const encode = (text: string) =>
  encodeURIComponent(text).replace(
    /[!'()*]/g,
    (character) => `%${character.charCodeAt(0).toString(16).toUpperCase()}`,
  );

function canonicalQuery(query: URLSearchParams): string {
  return [...query]
    .filter(([name]) => name !== 'X-Amz-Signature')
    .map(([name, value]) => [encode(name), encode(value)] as const)
    .sort(([a, x], [b, y]) => (a === b ? (x < y ? -1 : 1) : a < b ? -1 : 1))
    .map(([name, value]) => `${name}=${value}`)
    .join('&');
}

function readDate(stamp: string): number {
  const match = /^(\d{4})(\d{2})(\d{2})T(\d{2})(\d{2})(\d{2})Z$/.exec(stamp);
  if (!match) return Number.NaN;
  const [year, month, day, hour, minute, second] = match.slice(1).map(Number) as [
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  return Date.UTC(year, month - 1, day, hour, minute, second);
}

interface Claim {
  credential: string;
  stamp: string;
  signedHeaders: string;
  signature: string;
  payloadHash: string;
  expiresSeconds: number | null;
}

function readClaim(request: SignedRequest, query: URLSearchParams): Claim | SignatureFault {
  if (query.has('X-Amz-Signature') || query.has('X-Amz-Algorithm')) {
    if (query.get('X-Amz-Algorithm') !== ALGORITHM)
      return fault('AuthorizationQueryParametersError', 'X-Amz-Algorithm is not supported');
    const expires = Number(query.get('X-Amz-Expires'));
    if (!Number.isInteger(expires) || expires < 1 || expires > MAX_EXPIRY_SECONDS) {
      return fault('AuthorizationQueryParametersError', 'X-Amz-Expires must be from 1 second to 7 days');
    }
    return {
      credential: query.get('X-Amz-Credential') ?? '',
      stamp: query.get('X-Amz-Date') ?? '',
      signedHeaders: query.get('X-Amz-SignedHeaders') ?? '',
      signature: query.get('X-Amz-Signature') ?? '',
      payloadHash: query.get('X-Amz-Content-Sha256') ?? 'UNSIGNED-PAYLOAD',
      expiresSeconds: expires,
    };
  }
  const authorization = request.headers['authorization'];
  if (!authorization) return fault('AccessDenied', 'Access Denied');
  const match =
    /^AWS4-HMAC-SHA256\s+Credential=([^,\s]+),\s*SignedHeaders=([^,\s]+),\s*Signature=([0-9a-f]{64})$/.exec(
      authorization,
    );
  if (!match) return fault('AccessDenied', 'The authorization header is not one of signature version 4');
  return {
    credential: match[1] ?? '',
    signedHeaders: match[2] ?? '',
    signature: match[3] ?? '',
    stamp: request.headers['x-amz-date'] ?? '',
    payloadHash: request.headers['x-amz-content-sha256'] ?? 'UNSIGNED-PAYLOAD',
    expiresSeconds: null,
  };
}

const isFault = (claim: Claim | SignatureFault): claim is SignatureFault => 'code' in claim;

/**
 * Checks signature version 4 of a request, in its headers or in its address, from the published description of the algorithm
 * (Amazon S3 API reference, "Authenticating Requests: AWS Signature Version 4"). Null means that it holds.
 * @param now milliseconds since 1970
 */
export function verifySignature(
  request: SignedRequest,
  keys: Keys,
  region: string,
  now: number,
): SignatureFault | null {
  const [path = '/', rawQuery = ''] = request.rawUrl.split('?', 2);
  const query = new URLSearchParams(rawQuery);
  const claim = readClaim(request, query);
  if (isFault(claim)) return claim;
  const [accessKeyId, day, claimedRegion, service, end] = claim.credential.split('/');
  if (accessKeyId !== keys.accessKeyId)
    return fault('InvalidAccessKeyId', 'The AWS Access Key Id you provided does not exist in our records.');
  const at = readDate(claim.stamp);
  if (
    Number.isNaN(at) ||
    day !== claim.stamp.slice(0, 8) ||
    claimedRegion !== region ||
    service !== 's3' ||
    end !== 'aws4_request'
  ) {
    return fault('SignatureDoesNotMatch', 'The scope of the credential does not hold.');
  }
  if (claim.expiresSeconds === null ? Math.abs(now - at) > SKEW_MS : at - now > SKEW_MS) {
    return fault(
      'RequestTimeTooSkewed',
      'The difference between the request time and the current time is too large.',
    );
  }
  if (claim.expiresSeconds !== null && now > at + claim.expiresSeconds * 1000)
    return fault('AccessDenied', 'Request has expired');

  const names = claim.signedHeaders.split(';');
  const isComplete =
    names.includes('host') &&
    Object.keys(request.headers)
      .filter((name) => name.startsWith('x-amz-'))
      .every((name) => names.includes(name));
  if (!isComplete)
    return fault('AccessDenied', 'There were headers present in the request which were not signed');
  const canonical = [
    request.method,
    path
      .split('/')
      .map((part) => encode(decodeURIComponent(part)))
      .join('/'),
    canonicalQuery(query),
    ...names.map((name) => `${name}:${(request.headers[name] ?? '').trim().replace(/\s+/g, ' ')}`),
    '',
    claim.signedHeaders,
    claim.payloadHash,
  ].join('\n');
  const scope = `${day}/${region}/s3/aws4_request`;
  const toSign = [ALGORITHM, claim.stamp, scope, sha256(canonical)].join('\n');
  const key = ['s3', 'aws4_request'].reduce(
    (signing, part) => hmac(signing, part),
    hmac(hmac(`AWS4${keys.secretAccessKey}`, day ?? ''), region),
  );
  const expected = hmac(key, toSign);
  const given = Buffer.from(claim.signature, 'hex');
  return given.length === expected.length && timingSafeEqual(given, expected)
    ? null
    : fault(
        'SignatureDoesNotMatch',
        'The request signature we calculated does not match the signature you provided.',
      );
}
