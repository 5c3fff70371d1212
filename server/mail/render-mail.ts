import { themeColours } from '#drawing/theme/tokens.ts';
import type { MailItem, MailLink, MailWords } from './mail-words.ts';

// Mail programs know neither variables nor style sheets of ours, so values stand where they are used.
const {
  desk,
  paper,
  ink,
  'ink-2': soft,
  'rule-2': rule,
  strip,
  'strip-ink': stripInk,
} = themeColours('paper');
const font = "font-family:'Work Sans','Segoe UI',Helvetica,Arial,sans-serif";

/** A mail for those who read plain text. */
export function textOf({ heading, paragraphs, quote, action, items = [], footer }: MailWords): string {
  const parts = [
    heading,
    ...paragraphs,
    ...(quote === undefined ? [] : [quoted(quote)]),
    ...(action === undefined ? [] : [`${action.label}:\n${action.href}`]),
    ...items.map((item) =>
      [item.sentence, ...(item.quote === undefined ? [] : [quoted(item.quote)]), item.link.href].join('\n'),
    ),
    ['-- ', ...footer].join('\n'),
  ];
  return `${parts.join('\n\n')}\n`;
}

/** The same as a page: one column of title-block cells, no pictures, nothing that is fetched from anywhere. */
export function htmlOf({
  subject,
  heading,
  paragraphs,
  quote,
  action,
  items = [],
  footer,
}: MailWords): string {
  const body = [
    `<h1 style="margin:0 0 14px;font-size:20px;line-height:26px;font-weight:600">${escaped(heading)}</h1>`,
    ...paragraphs.map(paragraph),
    ...(quote === undefined ? [] : [quotation(quote)]),
    ...(action === undefined ? [] : [button(action)]),
    ...items.map(listed),
  ].join('\n');
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light">
<title>${escaped(subject)}</title>
</head>
<body style="margin:0;padding:0;background:${desk}">
<table role="presentation" width="100%" cellspacing="0" cellpadding="0" style="background:${desk}">
<tr><td align="center" style="padding:28px 12px">
<table role="presentation" width="100%" cellspacing="0" cellpadding="0" style="max-width:560px;background:${paper};border:2px solid ${ink};border-collapse:collapse;${font};color:${ink}">
<tr><td style="padding:9px 20px;border-bottom:1px solid ${ink};font-size:14px;line-height:20px;font-weight:700">Longpatch</td></tr>
<tr><td style="padding:22px 20px 24px;font-size:15px;line-height:22px">
${body}
</td></tr>
<tr><td style="padding:12px 20px 14px;border-top:1px solid ${rule};font-size:12px;line-height:18px;color:${soft}">
${footer.map((line) => `<p style="margin:0">${linked(escaped(line))}</p>`).join('\n')}
</td></tr>
</table>
</td></tr>
</table>
</body>
</html>
`;
}

function paragraph(text: string): string {
  return `<p style="margin:0 0 12px">${escaped(text)}</p>`;
}

function quotation(text: string): string {
  return `<blockquote style="margin:0 0 14px;padding:2px 0 2px 12px;border-left:3px solid ${rule};color:${soft}">${escaped(text).replaceAll('\n', '<br>')}</blockquote>`;
}

function button({ label, href }: MailLink): string {
  const link = escaped(href);
  return `<p style="margin:18px 0 14px"><a href="${link}" style="display:inline-block;padding:9px 16px;background:${strip};color:${stripInk};font-weight:600;text-decoration:none;border-radius:2px">${escaped(label)}</a></p>
<p style="margin:0;font-size:12px;line-height:18px;color:${soft}">Or copy this address: <a href="${link}" style="color:${soft};word-break:break-all">${link}</a></p>`;
}

function listed({ sentence, quote, link }: MailItem): string {
  return `<div style="padding:14px 0 2px;border-top:1px solid ${rule}">
<p style="margin:0 0 8px;font-weight:600">${escaped(sentence)}</p>
${quote === undefined ? '' : quotation(quote)}
<p style="margin:0 0 12px"><a href="${escaped(link.href)}" style="color:${ink}">${escaped(link.label)}</a></p>
</div>`;
}

const quoted = (text: string): string =>
  text
    .split('\n')
    .map((line) => `> ${line}`)
    .join('\n');

/** Addresses in a line of ours as links. */
const linked = (escapedText: string): string =>
  escapedText.replace(/https?:\/\/[^\s<]+/g, (href) => `<a href="${href}" style="color:${soft}">${href}</a>`);

function escaped(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll("'", '&#39;');
}
