import type { SunkMail } from './start-mail-sink.ts';

const ESCAPES: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};
const escapeHtml = (text: string) => text.replace(/[&<>"']/g, (character) => ESCAPES[character] ?? character);

const sheet = (
  title: string,
  body: string,
) => `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width">
<title>${escapeHtml(title)}</title><style>
:root{color-scheme:light dark}body{font:17px/1.5 Georgia,serif;max-width:52rem;margin:2rem auto;padding:0 1rem;background:#fafbf8;color:#1c2326}
table{width:100%;border-collapse:collapse}td,th{text-align:left;padding:.5rem .75rem .5rem 0;border-bottom:1px solid #c9d0ce;vertical-align:top}a{color:#0f5c8c}
pre{white-space:pre-wrap;overflow-wrap:anywhere;font-size:.8rem}iframe{width:100%;height:36rem;border:1px solid #1c2326;background:#fff}
@media (prefers-color-scheme:dark){body{background:#14181a;color:#e8ecea}a{color:#6fb7e0}td,th{border-color:#384246}}
</style></head><body>${body}</body></html>`;

/** The list of mails, newest first. */
export function renderInbox(mails: readonly SunkMail[], to: string): string {
  const rows = mails
    .slice(0, 200)
    .map(
      (mail) =>
        `<tr><td>${escapeHtml(mail.receivedAt.slice(0, 19).replace('T', ' '))}</td><td>${escapeHtml(mail.to.join(', '))}</td><td><a href="/mails/${mail.id}">${escapeHtml(mail.subject || 'no subject')}</a></td></tr>`,
    )
    .join('');
  return sheet(
    'Mail sink',
    `<h1>Mail sink</h1><p>Every mail that Benchleaf sends on this machine ends here${to ? `; these are for ${escapeHtml(to)}. <a href="/">All mails</a>` : ''}.</p>
<table><thead><tr><th>When (UTC)</th><th>To</th><th>Subject</th></tr></thead><tbody>${rows || '<tr><td colspan="3">No mail yet.</td></tr>'}</tbody></table>`,
  );
}

/** One mail: how it looks in a sandboxed frame, its text with links to follow, its headers. */
export function renderMessage(mail: SunkMail): string {
  const text = escapeHtml(mail.text).replace(
    /https?:\/\/[^\s<]+/g,
    (address) => `<a href="${address}">${address}</a>`,
  );
  return sheet(
    mail.subject,
    `<p><a href="/">All mails</a></p><h1>${escapeHtml(mail.subject)}</h1><p>From ${escapeHtml(mail.from)}<br>to ${escapeHtml(mail.to.join(', '))}, ${escapeHtml(mail.receivedAt)}</p>
<h2>Text</h2><pre>${text}</pre><h2>As a mail program shows it</h2><iframe sandbox title="The mail" src="/mails/${mail.id}/html"></iframe><h2>Headers</h2><pre>${escapeHtml(mail.headers)}</pre>`,
  );
}
