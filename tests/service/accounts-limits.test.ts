import { createHash } from 'node:crypto';
import { afterAll, describe, expect, it } from 'vitest';
import { sequelize } from '#db/client.ts';
import { RateLimit } from '#db/models/index.ts';
import { forgetTokens, sweepRateLimits, takeToken } from '#server/accounts/rate-limit.ts';
import { requestPasswordReset } from '#server/accounts/request-password-reset.ts';
import { signIn } from '#server/accounts/sign-in.ts';
import { AppError } from '#server/errors.ts';
import { browserHeaders, codeOf, listMails, makePerson, makeWord } from './people.ts';

afterAll(() => sequelize.close());

const guess = (email: string, headers: Headers) =>
  codeOf(signIn({ email, password: 'a wrong guess', headers }));

const nameRow = (key: string) => `own:${createHash('sha256').update(key).digest('hex')}`;

/** Lets time pass for one key. */
async function moveBack(key: string, byMs: number): Promise<void> {
  await RateLimit.decrement('lastRequest', { by: byMs, where: { key: nameRow(key) } });
}

/** The answers to so many tries, one after the other. */
async function collect(times: number, run: (index: number) => Promise<string>): Promise<string[]> {
  const codes: string[] = [];
  for (let index = 0; index < times; index += 1) codes.push(await run(index));
  return codes;
}

describe('a counted key', () => {
  const allowance = { limit: 5, seconds: 60 };

  it('lets so many through and then says how long to wait', async () => {
    const key = makeWord();
    expect(await collect(5, () => codeOf(takeToken(key, allowance)))).toEqual(Array(5).fill('none'));
    const refusal: unknown = await takeToken(key, allowance).catch((error: unknown) => error);
    if (!(refusal instanceof AppError)) throw new Error('it was not refused');
    expect(refusal).toMatchObject({ code: 'TOO_MANY', status: 429 });
    expect(refusal.retryAfter).toBeGreaterThan(0);
    expect(refusal.retryAfter).toBeLessThanOrEqual(60);
  });

  it('lets exactly so many through when twenty come at the same moment', async () => {
    const key = makeWord();
    const codes = await Promise.all(Array.from({ length: 20 }, () => codeOf(takeToken(key, allowance))));
    expect(codes.filter((code) => code === 'none')).toHaveLength(5);
  });

  it('is free again after its time, and not prolonged by tries in between', async () => {
    const key = makeWord();
    await collect(8, () => codeOf(takeToken(key, allowance)));
    await moveBack(key, 60_000);
    expect(await codeOf(takeToken(key, allowance))).toBe('none');
  });

  it('does not touch another key', async () => {
    const [full, other] = [makeWord(), makeWord()];
    await collect(6, () => codeOf(takeToken(full, allowance)));
    expect(await codeOf(takeToken(other, allowance))).toBe('none');
  });

  it('can be forgotten', async () => {
    const key = makeWord();
    await collect(6, () => codeOf(takeToken(key, allowance)));
    await forgetTokens(key);
    expect(await codeOf(takeToken(key, allowance))).toBe('none');
  });

  it('keeps no address and no e-mail in the table', async () => {
    const email = `${makeWord()}@readers.test`;
    await guess(email, browserHeaders({ address: '203.0.113.7' }));
    const rows = JSON.stringify(await RateLimit.findAll());
    expect(rows).not.toContain(email);
    expect(rows).not.toContain('203.0.113.7');
  });

  it('is swept a day later', async () => {
    const key = makeWord();
    await takeToken(key, allowance);
    await sweepRateLimits();
    expect(await RateLimit.count({ where: { key: nameRow(key) } })).toBe(1);
    await moveBack(key, 25 * 3_600_000);
    expect(await sweepRateLimits()).toBeGreaterThan(0);
    expect(await RateLimit.count({ where: { key: nameRow(key) } })).toBe(0);
  });
});

describe('guessing passwords', () => {
  it('of one account is stopped though each guess comes from another address', async () => {
    const person = await makePerson();
    const codes = await collect(12, () => guess(person.email, browserHeaders()));
    expect(codes).toEqual([...Array<string>(10).fill('WRONG_PASSWORD'), 'TOO_MANY', 'TOO_MANY']);
    const { email, password } = person;
    expect(await codeOf(signIn({ email, password, headers: browserHeaders() }))).toBe('TOO_MANY');
  });

  it('of an account that does not exist is stopped in the same way', async () => {
    const email = `${makeWord()}@readers.test`;
    const codes = await collect(11, () => guess(email, browserHeaders()));
    expect(codes).toEqual([...Array<string>(10).fill('WRONG_PASSWORD'), 'TOO_MANY']);
  });

  it('from one address is stopped though each guess is for another account', async () => {
    const address = `test-${makeWord()}`;
    const tryOne = () => guess(`${makeWord()}@readers.test`, browserHeaders({ address }));
    const codes = await collect(31, tryOne);
    expect(codes).toEqual([...Array<string>(30).fill('WRONG_PASSWORD'), 'TOO_MANY']);
    const elsewhere = guess(`${makeWord()}@readers.test`, browserHeaders());
    expect(await elsewhere).toBe('WRONG_PASSWORD');
  });

  it('is not helped by headers that a client can set', async () => {
    const address = `test-${makeWord()}`;
    const codes = await collect(31, (index) => {
      const headers = browserHeaders({ address });
      for (const name of ['x-forwarded-for', 'x-real-ip', 'forwarded', 'cf-connecting-ip', 'x-client-ip'])
        headers.set(name, `198.51.100.${index}`);
      return guess(`${makeWord()}@readers.test`, headers);
    });
    expect(codes.at(-1)).toBe('TOO_MANY');
  });

  it('of others does not keep a person at another address out', async () => {
    const [victim, bystander] = [await makePerson(), await makePerson()];
    await collect(11, () => guess(victim.email, browserHeaders()));
    const { email, password } = bystander;
    expect(await codeOf(signIn({ email, password, headers: browserHeaders() }))).toBe('none');
  });

  it('is forgiven once the password is right', async () => {
    const { email, password } = await makePerson();
    const headers = browserHeaders();
    for (let round = 0; round < 2; round += 1) {
      await collect(9, () => guess(email, headers));
      expect(await codeOf(signIn({ email, password, headers }))).toBe('none');
    }
  });
});

describe('asking for links', () => {
  it('fills nobody’s mailbox', async () => {
    const person = await makePerson();
    const codes = await collect(7, () =>
      codeOf(requestPasswordReset({ email: person.email, headers: browserHeaders() })),
    );
    expect(codes).toEqual([...Array<string>(5).fill('none'), 'TOO_MANY', 'TOO_MANY']);
    expect(await listMails(person.email, 'reset-password')).toHaveLength(5);
  });
});
