import { appendFile, mkdir, readFile, writeFile } from 'node:fs/promises';
import { createServer, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { renderInbox, renderMessage } from './pages.ts';

/** A mail as it arrived. */
export interface SunkMail {
  id: number;
  messageId: string;
  receivedAt: string;
  from: string;
  /** Addresses of the envelope: who really got it. */
  to: string[];
  subject: string;
  text: string;
  html: string;
  headers: string;
}

export interface MailSinkOptions {
  smtpPort: number;
  pagePort: number;
  /** Keeps the mails over a restart; left out, they end with the process. */
  file?: string;
}

export interface RunningMailSink {
  smtpUrl: string;
  pageUrl: string;
  close(): Promise<void>;
}

/** How the next mails are treated: taken, refused for now (451), refused for good (550), or the line cut after the text was taken. */
type Fault = 'none' | 'later' | 'never' | 'cut';

async function readKept(file: string | undefined): Promise<SunkMail[]> {
  if (!file) return [];
  await mkdir(path.dirname(file), { recursive: true });
  const text = await readFile(file, 'utf8').catch(() => '');
  return text
    .split('\n')
    .filter(Boolean)
    .map((line) => JSON.parse(line) as SunkMail);
}

/** A mail server that keeps what it gets and sends nothing on, with a page to read it. Loopback only. */
export async function startMailSink(options: MailSinkOptions): Promise<RunningMailSink> {
  let mails = await readKept(options.file);
  let fault: Fault = 'none';

  const smtp = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onData(stream, session, callback) {
      if (fault === 'later' || fault === 'never') {
        stream.resume();
        const refusal = Object.assign(new Error(fault === 'later' ? 'Try again later' : 'No such mailbox'), {
          responseCode: fault === 'later' ? 451 : 550,
        });
        stream.on('end', () => {
          callback(refusal);
        });
        return;
      }
      simpleParser(stream)
        .then(async (parsed) => {
          const mail: SunkMail = {
            id: (mails.at(-1)?.id ?? 0) + 1,
            messageId: parsed.messageId ?? '',
            receivedAt: new Date().toISOString(),
            from: parsed.from?.text ?? '',
            to: session.envelope.rcptTo.map((recipient) => recipient.address),
            subject: parsed.subject ?? '',
            text: parsed.text ?? '',
            html: parsed.html || '',
            headers: parsed.headerLines.map((header) => header.line).join('\n'),
          };
          mails.push(mail);
          if (options.file) await appendFile(options.file, `${JSON.stringify(mail)}\n`);
          if (fault === 'cut') {
            fault = 'none';
            callback(Object.assign(new Error('line cut'), { responseCode: 421 }));
            return;
          }
          callback();
        })
        .catch((error: unknown) => {
          callback(error instanceof Error ? error : new Error('unreadable mail'));
        });
    },
  });
  smtp.on('error', () => undefined);

  const send = (
    response: ServerResponse,
    status: number,
    type: string,
    body: string,
    policy = "default-src 'none'; style-src 'unsafe-inline'; frame-src 'self'; form-action 'self'",
  ) => {
    response.writeHead(status, {
      'content-type': `${type}; charset=utf-8`,
      'content-security-policy': policy,
      'x-content-type-options': 'nosniff',
    });
    response.end(body);
  };
  const page = createServer((request, response) => {
    const url = new URL(request.url ?? '/', 'http://sink');
    const to = url.searchParams.get('to')?.toLowerCase();
    const listed = mails.filter((mail) => !to || mail.to.some((address) => address.toLowerCase() === to));
    const one = /^\/mails\/(\d+)(\/html)?$/.exec(url.pathname);
    const mail = one && mails.find((each) => each.id === Number(one[1]));
    if (url.pathname === '/api/messages' && request.method === 'GET')
      send(response, 200, 'application/json', JSON.stringify(listed));
    else if (url.pathname === '/api/messages' && request.method === 'DELETE') {
      mails = [];
      void (options.file ? writeFile(options.file, '') : Promise.resolve()).then(() => {
        send(response, 200, 'application/json', '[]');
      });
    } else if (url.pathname === '/api/fault' && request.method === 'POST') {
      const asked = url.searchParams.get('kind');
      fault = asked === 'later' || asked === 'never' || asked === 'cut' ? asked : 'none';
      send(response, 200, 'application/json', JSON.stringify({ fault }));
    } else if (mail && one[2])
      send(
        response,
        200,
        'text/html',
        mail.html,
        "default-src 'none'; style-src 'unsafe-inline'; sandbox allow-popups allow-top-navigation-by-user-activation",
      );
    else if (mail) send(response, 200, 'text/html', renderMessage(mail));
    else if (url.pathname === '/')
      send(response, 200, 'text/html', renderInbox(listed.toReversed(), to ?? ''));
    else send(response, 404, 'text/plain', 'There is nothing here.');
  });

  await new Promise<void>((resolve, reject) => {
    smtp.once('error', reject);
    smtp.listen(options.smtpPort, '127.0.0.1', resolve);
  });
  await new Promise<void>((resolve, reject) => {
    page.once('error', reject);
    page.listen(options.pagePort, '127.0.0.1', resolve);
  });
  const smtpPort = (smtp.server.address() as AddressInfo).port;
  const pagePort = (page.address() as AddressInfo).port;
  return {
    smtpUrl: `smtp://127.0.0.1:${smtpPort}`,
    pageUrl: `http://127.0.0.1:${pagePort}`,
    close: async () => {
      page.closeAllConnections();
      await Promise.all([
        new Promise((resolve) => page.close(resolve)),
        new Promise<void>((resolve) => {
          smtp.close(() => {
            resolve();
          });
        }),
      ]);
    },
  };
}
