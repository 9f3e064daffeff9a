import { QueryTypes, type Transaction } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { enqueue } from '../jobs/enqueue.ts';
import { renderEmail, type EmailText } from './render-email.ts';

export interface EmailToWrite extends EmailText {
  /** What sort of mail, e.g. `receipt`. */
  kind: string;
  /** Says what the mail is about; a second mail with the same reference is not written. */
  reference: string;
  to: { name: string; address: string };
}

/** Characters that could end a header or add a recipient. */
const UNSAFE_IN_HEADER = /[\p{Cc}\u2028\u2029\u202a-\u202e\u2066-\u2069]/gu;

/**
 * Puts an e-mail into the outbox in the caller's transaction; the worker sends it. Writing the same reference again does nothing.
 * @throws when the address could carry a second recipient or a header
 */
export async function writeEmail(email: EmailToWrite, transaction?: Transaction): Promise<void> {
  const address = email.to.address.trim().toLowerCase();
  if (!/^[^\s,;<>@"]+@[^\s,;<>@"]+$/.test(address) || address.length > 254)
    throw new Error('not one plain address');
  const subject = email.subject.replaceAll(UNSAFE_IN_HEADER, ' ').slice(0, 200);
  const { text, html } = renderEmail({ ...email, subject });
  const rows = await sequelize.query<{ id: string }>(
    `insert into outbox_emails (kind, reference, to_name, to_address, subject, text_body, html_body)
     values (:kind, :reference, :name, :address, :subject, :text, :html)
     on conflict (reference) do nothing returning id`,
    {
      replacements: {
        kind: email.kind,
        reference: email.reference,
        name: email.to.name.replaceAll(UNSAFE_IN_HEADER, ' ').slice(0, 200),
        address,
        subject,
        text,
        html,
      },
      type: QueryTypes.SELECT,
      transaction: transaction ?? null,
    },
  );
  const emailId = rows[0]?.id;
  if (emailId) await enqueue('send-email', { emailId }, { key: `send-email:${emailId}`, transaction });
}
