import {
  Answer,
  Build,
  Copy,
  Imprint,
  ImprintMember,
  Licence,
  Order,
  OrderLine,
  ProofInvite,
  ProofReport,
  Question,
  Report,
  SavedFit,
  Session,
  User,
} from '#db/models/index.ts';
import { refuse } from '../errors.ts';
import type { SignedInUser } from './actor.ts';

/**
 * Everything that Benchleaf keeps about a person, as plain data for a JSON file. Secrets (password hash, session tokens,
 * internal ids of the payment service) are not part of it.
 */
export async function exportPersonalData(actor: SignedInUser): Promise<Record<string, unknown>> {
  const userId = actor.id;
  const where = { userId };
  const [person, sessions, memberships, orders, licences, fits, copies, proofs, proofReports, questions] =
    await Promise.all([
      User.findByPk(userId, {
        attributes: ['id', 'name', 'email', 'emailVerified', 'role', 'units', 'createdAt'],
      }),
      Session.findAll({ where, attributes: ['createdAt', 'expiresAt', 'ipAddress', 'userAgent'] }),
      ImprintMember.findAll({
        where,
        attributes: ['role', 'createdAt'],
        include: [{ model: Imprint, as: 'imprint', attributes: ['name', 'slug'] }],
      }),
      Order.findAll({
        where,
        attributes: [
          'number',
          'email',
          'name',
          'state',
          'currency',
          'subtotalMinor',
          'discountMinor',
          'taxMinor',
          'totalMinor',
          'refundedMinor',
          'country',
          'consent',
          'createdAt',
          'paidAt',
        ],
        include: [
          {
            model: OrderLine,
            as: 'lines',
            attributes: ['title', 'kind', 'pieces', 'priceMinor', 'discountMinor', 'taxMinor'],
          },
        ],
      }),
      Licence.findAll({
        where,
        attributes: ['number', 'planId', 'kind', 'pieces', 'state', 'holderName', 'grantedAt', 'endedAt'],
      }),
      SavedFit.findAll({ where }),
      Copy.findAll({
        attributes: ['number', 'fit', 'units', 'paper', 'state', 'createdAt', 'readyAt'],
        include: [{ model: Licence, as: 'licence', attributes: ['number'], where, required: true }],
      }),
      ProofInvite.findAll({ where, attributes: ['planId', 'email', 'acceptedAt', 'revokedAt'] }),
      ProofReport.findAll({ where, attributes: ['planId', 'verdict', 'body', 'createdAt'] }),
      Question.findAll({ where, attributes: ['planId', 'authorName', 'body', 'createdAt'] }),
    ]);
  const [answers, builds, reports] = await Promise.all([
    Answer.findAll({ where, attributes: ['questionId', 'authorName', 'body', 'createdAt'] }),
    Build.findAll({ where, attributes: ['planId', 'authorName', 'verdict', 'body', 'createdAt'] }),
    Report.findAll({ where, attributes: ['planId', 'body', 'state', 'createdAt'] }),
  ]);
  if (!person) refuse('NOT_FOUND');
  const plain = (rows: { get: (options: { plain: true }) => unknown }[]) =>
    rows.map((row) => row.get({ plain: true }));
  return {
    made: new Date().toISOString(),
    person: person.get({ plain: true }),
    sessions: plain(sessions),
    imprints: plain(memberships),
    orders: plain(orders),
    licences: plain(licences),
    fits: plain(fits),
    copies: plain(copies),
    proofs: plain(proofs),
    proofReports: plain(proofReports),
    questions: plain(questions),
    answers: plain(answers),
    builds: plain(builds),
    reports: plain(reports),
  };
}
