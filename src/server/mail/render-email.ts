/** What a mail says. Paragraphs are plain text; nothing in them is read as markup. */
export interface EmailText {
  subject: string;
  paragraphs: string[];
  /** Rows of a small table, e.g. the lines of a receipt. */
  rows?: [string, string][];
  action?: { label: string; url: string };
  /** Small print under the rule. */
  footnote?: string;
}

const ESCAPES: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};
const escapeHtml = (text: string) => text.replace(/[&<>"']/g, (character) => ESCAPES[character] ?? character);

/** The mail as a plain text and as an HTML sheet in the colours of the house, without pictures or remote content. */
export function renderEmail(email: EmailText): { text: string; html: string } {
  const width = Math.max(0, ...(email.rows ?? []).map(([label]) => label.length));
  const text = [
    ...email.paragraphs,
    ...(email.rows?.length
      ? [email.rows.map(([label, value]) => `${label.padEnd(width)}  ${value}`).join('\n')]
      : []),
    ...(email.action ? [`${email.action.label}:\n${email.action.url}`] : []),
    `--\nBenchleaf${email.footnote ? `\n${email.footnote}` : ''}`,
  ].join('\n\n');

  const ink = '#1C2326';
  const rule = '#C9D0CE';
  const cell = `padding:6px 0;border-bottom:1px solid ${rule};`;
  const rows = (email.rows ?? [])
    .map(
      ([label, value]) =>
        `<tr><td style="${cell}">${escapeHtml(label)}</td><td style="${cell}text-align:right;font-family:'B612 Mono',monospace">${escapeHtml(value)}</td></tr>`,
    )
    .join('');
  const html = `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escapeHtml(email.subject)}</title></head>
<body style="margin:0;padding:24px;background:#FAFBF8;color:${ink};font:17px/1.5 Literata,Georgia,serif">
<table role="presentation" style="max-width:600px;margin:0 auto;width:100%;border:1px solid ${ink};border-collapse:collapse"><tr><td style="padding:28px">
<p style="margin:0 0 20px;font-weight:600">Benchleaf</p>
${email.paragraphs.map((paragraph) => `<p style="margin:0 0 16px">${escapeHtml(paragraph)}</p>`).join('\n')}
${rows ? `<table style="width:100%;border-collapse:collapse;margin:0 0 16px">${rows}</table>` : ''}
${email.action ? `<p style="margin:24px 0"><a href="${escapeHtml(email.action.url)}" style="display:inline-block;padding:12px 18px;border:2px solid #0F5C8C;color:#0F5C8C;text-decoration:none">${escapeHtml(email.action.label)}</a></p>` : ''}
</td></tr><tr><td style="padding:12px 28px;border-top:1px solid ${ink};font-size:14px;color:#566067">${escapeHtml(email.footnote ?? 'Benchleaf, build plans for rooms as they are.')}</td></tr></table>
</body></html>`;
  return { text, html };
}
