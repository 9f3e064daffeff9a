import { Account } from './account.ts';
import { Answer } from './answer.ts';
import { Asset } from './asset.ts';
import { Audit } from './audit.ts';
import { BenchState } from './bench-state.ts';
import { Book } from './book.ts';
import { Build } from './build.ts';
import { Code } from './code.ts';
import { CodeUse } from './code-use.ts';
import { Copy } from './copy.ts';
import { Correction } from './correction.ts';
import { Imprint } from './imprint.ts';
import { ImprintInvite } from './imprint-invite.ts';
import { ImprintMember } from './imprint-member.ts';
import { InboxEvent } from './inbox-event.ts';
import { LedgerAccount } from './ledger-account.ts';
import { LedgerEntry } from './ledger-entry.ts';
import { LedgerTransaction } from './ledger-transaction.ts';
import { Licence } from './licence.ts';
import { LicenceOffer } from './licence-offer.ts';
import { Order } from './order.ts';
import { OrderLine } from './order-line.ts';
import { OutboxEmail } from './outbox-email.ts';
import { Payout } from './payout.ts';
import { Plan } from './plan.ts';
import { ProofInvite } from './proof-invite.ts';
import { ProofReport } from './proof-report.ts';
import { Question } from './question.ts';
import { RateLimit } from './rate-limit.ts';
import { Refund } from './refund.ts';
import { Report } from './report.ts';
import { Revision } from './revision.ts';
import { SavedFit } from './saved-fit.ts';
import { Session } from './session.ts';
import { Source } from './source.ts';
import { Statement } from './statement.ts';
import { User } from './user.ts';
import { Verification } from './verification.ts';
import { VisitDay } from './visit-day.ts';

Account.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Answer.belongsTo(Question, { as: 'question', foreignKey: 'questionId' });
Answer.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Asset.belongsTo(Revision, { as: 'revision', foreignKey: 'revisionId' });
BenchState.belongsTo(SavedFit, { as: 'savedFit', foreignKey: 'fitId' });
BenchState.belongsTo(Licence, { as: 'licence', foreignKey: 'licenceId' });
Build.belongsTo(Licence, { as: 'licence', foreignKey: 'licenceId' });
Build.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Build.belongsTo(User, { as: 'user', foreignKey: 'userId' });
CodeUse.belongsTo(Code, { as: 'code', foreignKey: 'codeId' });
CodeUse.belongsTo(Order, { as: 'order', foreignKey: 'orderId' });
CodeUse.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Code.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
Code.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Code.belongsTo(Source, { as: 'source', foreignKey: 'sourceId' });
Copy.belongsTo(SavedFit, { as: 'savedFit', foreignKey: 'fitId' });
Copy.belongsTo(Licence, { as: 'licence', foreignKey: 'licenceId' });
Copy.belongsTo(Revision, { as: 'revision', foreignKey: 'revisionId' });
Correction.belongsTo(Revision, { as: 'fixedRevision', foreignKey: 'fixedRevisionId' });
Correction.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Correction.belongsTo(User, { as: 'reporter', foreignKey: 'reportedBy' });
Correction.belongsTo(Revision, { as: 'revision', foreignKey: 'revisionId' });
SavedFit.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
SavedFit.belongsTo(User, { as: 'user', foreignKey: 'userId' });
ImprintInvite.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
ImprintInvite.belongsTo(User, { as: 'inviter', foreignKey: 'invitedBy' });
ImprintMember.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
ImprintMember.belongsTo(User, { as: 'user', foreignKey: 'userId' });
LedgerAccount.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
LedgerEntry.belongsTo(LedgerAccount, { as: 'account', foreignKey: 'accountId' });
LedgerEntry.belongsTo(LedgerTransaction, { as: 'transaction', foreignKey: 'transactionId' });
LedgerTransaction.belongsTo(OrderLine, { as: 'orderLine', foreignKey: 'orderLineId' });
LicenceOffer.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Licence.belongsTo(OrderLine, { as: 'orderLine', foreignKey: 'orderLineId' });
Licence.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Licence.belongsTo(User, { as: 'user', foreignKey: 'userId' });
OrderLine.belongsTo(SavedFit, { as: 'savedFit', foreignKey: 'fitId' });
OrderLine.belongsTo(LicenceOffer, { as: 'offer', foreignKey: 'offerId' });
OrderLine.belongsTo(Order, { as: 'order', foreignKey: 'orderId' });
OrderLine.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
OrderLine.belongsTo(Revision, { as: 'revision', foreignKey: 'revisionId' });
Order.belongsTo(Code, { as: 'code', foreignKey: 'codeId' });
Order.belongsTo(Source, { as: 'source', foreignKey: 'sourceId' });
Order.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Payout.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
Plan.belongsTo(Revision, { as: 'currentRevision', foreignKey: 'currentRevisionId' });
Plan.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
ProofInvite.belongsTo(User, { as: 'inviter', foreignKey: 'invitedBy' });
ProofInvite.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
ProofInvite.belongsTo(User, { as: 'user', foreignKey: 'userId' });
ProofReport.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
ProofReport.belongsTo(Revision, { as: 'revision', foreignKey: 'revisionId' });
ProofReport.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Question.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Question.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Refund.belongsTo(Order, { as: 'order', foreignKey: 'orderId' });
Refund.belongsTo(User, { as: 'requester', foreignKey: 'requestedBy' });
Report.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Report.belongsTo(Revision, { as: 'revision', foreignKey: 'revisionId' });
Report.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Revision.belongsTo(User, { as: 'creator', foreignKey: 'createdBy' });
Revision.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
Session.belongsTo(User, { as: 'user', foreignKey: 'userId' });
Source.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
Statement.belongsTo(Imprint, { as: 'imprint', foreignKey: 'imprintId' });
VisitDay.belongsTo(Plan, { as: 'plan', foreignKey: 'planId' });
VisitDay.belongsTo(Source, { as: 'source', foreignKey: 'sourceId' });

User.hasMany(Session, { as: 'sessions', foreignKey: 'userId' });
User.hasMany(Account, { as: 'accounts', foreignKey: 'userId' });
User.hasMany(ImprintMember, { as: 'memberships', foreignKey: 'userId' });
User.hasMany(Licence, { as: 'licences', foreignKey: 'userId' });
User.hasMany(SavedFit, { as: 'fits', foreignKey: 'userId' });
User.hasMany(Order, { as: 'orders', foreignKey: 'userId' });
Imprint.hasMany(ImprintMember, { as: 'members', foreignKey: 'imprintId' });
Imprint.hasMany(ImprintInvite, { as: 'invites', foreignKey: 'imprintId' });
Imprint.hasMany(Plan, { as: 'plans', foreignKey: 'imprintId' });
Imprint.hasMany(Source, { as: 'sources', foreignKey: 'imprintId' });
Imprint.hasMany(Code, { as: 'codes', foreignKey: 'imprintId' });
Imprint.hasMany(Payout, { as: 'payouts', foreignKey: 'imprintId' });
Imprint.hasMany(Statement, { as: 'statements', foreignKey: 'imprintId' });
Imprint.hasMany(LedgerAccount, { as: 'ledgerAccounts', foreignKey: 'imprintId' });
Plan.hasMany(Revision, { as: 'revisions', foreignKey: 'planId' });
Plan.hasMany(LicenceOffer, { as: 'offers', foreignKey: 'planId' });
Plan.hasMany(ProofInvite, { as: 'proofInvites', foreignKey: 'planId' });
Plan.hasMany(ProofReport, { as: 'proofReports', foreignKey: 'planId' });
Plan.hasMany(Correction, { as: 'corrections', foreignKey: 'planId' });
Plan.hasMany(SavedFit, { as: 'fits', foreignKey: 'planId' });
Plan.hasMany(Licence, { as: 'licences', foreignKey: 'planId' });
Plan.hasMany(Question, { as: 'questions', foreignKey: 'planId' });
Plan.hasMany(Build, { as: 'builds', foreignKey: 'planId' });
Plan.hasMany(Report, { as: 'reports', foreignKey: 'planId' });
Plan.hasMany(OrderLine, { as: 'orderLines', foreignKey: 'planId' });
Revision.hasMany(Asset, { as: 'assets', foreignKey: 'revisionId' });
Revision.hasMany(ProofReport, { as: 'proofReports', foreignKey: 'revisionId' });
Revision.hasMany(Copy, { as: 'copies', foreignKey: 'revisionId' });
Order.hasMany(OrderLine, { as: 'lines', foreignKey: 'orderId' });
Order.hasMany(Refund, { as: 'refunds', foreignKey: 'orderId' });
Order.hasOne(CodeUse, { as: 'codeUse', foreignKey: 'orderId' });
Code.hasMany(CodeUse, { as: 'uses', foreignKey: 'codeId' });
OrderLine.hasOne(Licence, { as: 'licence', foreignKey: 'orderLineId' });
Licence.hasMany(Copy, { as: 'copies', foreignKey: 'licenceId' });
Licence.hasMany(BenchState, { as: 'benchStates', foreignKey: 'licenceId' });
Licence.hasOne(Build, { as: 'build', foreignKey: 'licenceId' });
LedgerTransaction.hasMany(LedgerEntry, { as: 'entries', foreignKey: 'transactionId' });
LedgerAccount.hasMany(LedgerEntry, { as: 'entries', foreignKey: 'accountId' });
Question.hasMany(Answer, { as: 'answers', foreignKey: 'questionId' });

/** The models with their associations in place: import them from here, never from their own files. */
export {
  Account,
  Answer,
  Asset,
  Audit,
  BenchState,
  Book,
  Build,
  Code,
  CodeUse,
  Copy,
  Correction,
  Imprint,
  ImprintInvite,
  ImprintMember,
  InboxEvent,
  LedgerAccount,
  LedgerEntry,
  LedgerTransaction,
  Licence,
  LicenceOffer,
  Order,
  OrderLine,
  OutboxEmail,
  Payout,
  Plan,
  ProofInvite,
  ProofReport,
  Question,
  RateLimit,
  Refund,
  Report,
  Revision,
  SavedFit,
  Session,
  Source,
  Statement,
  User,
  Verification,
  VisitDay,
};
export type { OrderState } from './order.ts';
