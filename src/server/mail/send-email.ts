import nodemailer from 'nodemailer';
import { QueryTypes } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { env } from '../env.ts';

const transport = nodemailer.createTransport({
  url: env.SMTP_URL,
  connectionTimeout: 10_000,
  greetingTimeout: 10_000,
  socketTimeout: 20_000,
});

interface WaitingEmail {
  id: string;
  to_name: string;
  to_address: string;
  subject: string;
  text_body: string;
  html_body: string;
}

/**
 * Sends one mail of the outbox. May run any number of times: a sent mail is not sent again, and a second delivery after
 * a cut line carries the same Message-ID, by which mailboxes know it.
 * @throws when the mail server refuses or does not answer, so that the job is tried again later
 */
export async function sendEmail(emailId: string): Promise<void> {
  const [email] = await sequelize.query<WaitingEmail>(
    `select id, to_name, to_address, subject, text_body, html_body from outbox_emails where id = :emailId and state <> 'sent'`,
    { replacements: { emailId }, type: QueryTypes.SELECT },
  );
  if (!email) return;
  try {
    await transport.sendMail({
      from: env.MAIL_FROM,
      to: { name: email.to_name, address: email.to_address },
      subject: email.subject,
      text: email.text_body,
      html: email.html_body,
      messageId: `<${email.id}@${new URL(env.SITE_URL).hostname}>`,
      disableFileAccess: true,
      disableUrlAccess: true,
    });
  } catch (error) {
    await sequelize.query(
      `update outbox_emails set attempts = attempts + 1, error = :error where id = :emailId`,
      {
        replacements: { emailId, error: error instanceof Error ? error.message.slice(0, 500) : 'unknown' },
        type: QueryTypes.UPDATE,
      },
    );
    throw error;
  }
  await sequelize.query(
    `update outbox_emails set state = 'sent', sent_at = now(), attempts = attempts + 1, error = null where id = :emailId`,
    { replacements: { emailId }, type: QueryTypes.UPDATE },
  );
}
