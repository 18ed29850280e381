/** Plain text first: the HTML part is made of the very same paragraphs, so the two cannot differ. */
import { config } from '../config';
import type { Mail } from './send';

export interface MailParts {
  to: string;
  subject: string;
  /** What is asked or said, before the link. */
  paragraphs: string[];
  /** The one link of the message. */
  link?: { words: string; path: string };
  /** Why the person gets this, and whether it can be switched off. */
  because: string;
}

function escape(text: string): string {
  return text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
}

/** No line breaks may come into a header by way of somebody's name. */
function oneLine(text: string): string {
  return text.replace(/\s+/g, ' ').trim();
}

/** Makes both parts of a message. Never give it a count, a place on the map or an answer of the model. */
export function layOut(parts: MailParts): Mail {
  const link = parts.link && { words: parts.link.words, url: config().origin + parts.link.path };
  const text = [...parts.paragraphs, ...(link ? [`${link.words}: ${link.url}`] : []), parts.because].join('\n\n');
  const paragraph = (content: string) => `<p style="margin:0 0 16px">${content}</p>`;
  const html = [
    '<!doctype html><html lang="en-GB"><body style="margin:0;padding:32px;background:#e9eee9">',
    '<div style="max-width:560px;margin:0 auto;padding:32px;background:#fbfcfa;color:#14211d;font:16px/1.5 sans-serif">',
    ...parts.paragraphs.map((content) => paragraph(escape(content))),
    ...(link
      ? [
          paragraph(
            `${escape(link.words)}:<br><a style="color:#1c5240" href="${escape(link.url)}">${escape(link.url)}</a>`
          )
        ]
      : []),
    `<p style="margin:0;color:#586760;font-size:14px">${escape(parts.because)}</p>`,
    '</div></body></html>'
  ].join('\n');
  return { to: parts.to, subject: oneLine(parts.subject), text: `${text}\n`, html };
}
