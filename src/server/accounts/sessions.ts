import { Op } from 'sequelize';
import { Session, Verification } from '#db/models/index.ts';
import { refuse } from '../errors.ts';
import type { SignedInUser } from './actor.ts';

/** A signed-in browser, as its owner sees it; the token stays inside. */
export interface ListedSession {
  id: string;
  isThis: boolean;
  startedAt: Date;
  expiresAt: Date;
  address: string | null;
  browser: string;
}

/** The browsers in which a person is signed in, the newest first. */
export async function listSessions(actor: SignedInUser): Promise<ListedSession[]> {
  const rows = await Session.findAll({
    attributes: ['id', 'createdAt', 'expiresAt', 'ipAddress', 'userAgent'],
    where: { userId: actor.id, expiresAt: { [Op.gt]: new Date() } },
    order: [['createdAt', 'DESC']],
    limit: 100,
  });
  return rows.map((row) => ({
    id: row.id,
    isThis: row.id === actor.sessionId,
    startedAt: row.createdAt,
    expiresAt: row.expiresAt,
    address: row.ipAddress,
    browser: nameBrowser(row.userAgent ?? ''),
  }));
}

/** Words for the browser and system that a user-agent line names; only ever shown, never decided upon. */
function nameBrowser(userAgent: string): string {
  const browser = /Firefox|Edg|OPR|Chrome|Safari/.exec(userAgent)?.[0];
  const system = /Android|iPhone|iPad|Windows|Mac OS X|Linux/.exec(userAgent)?.[0];
  const names: Record<string, string> = { Edg: 'Edge', OPR: 'Opera', 'Mac OS X': 'macOS' };
  const words = [browser, system].flatMap((word) => (word ? [names[word] ?? word] : []));
  return words.length ? words.join(' on ') : 'A browser';
}

/**
 * Signs one of one's own browsers out.
 * @throws AppError NOT_FOUND
 */
export async function revokeSession(options: { actor: SignedInUser; sessionId: string }): Promise<void> {
  const { actor, sessionId } = options;
  const count = await Session.destroy({ where: { id: sessionId, userId: actor.id } });
  if (!count) refuse('NOT_FOUND', { detail: 'This browser is signed out already.' });
}

/** Signs every browser out except the one that asks. @returns how many */
export async function revokeOtherSessions(actor: SignedInUser): Promise<number> {
  return Session.destroy({ where: { userId: actor.id, id: { [Op.ne]: actor.sessionId } } });
}

/** Removes sessions and link secrets that have run out. @returns how many */
export async function sweepSessions(): Promise<number> {
  const where = { expiresAt: { [Op.lt]: new Date() } };
  return (await Session.destroy({ where })) + (await Verification.destroy({ where }));
}
