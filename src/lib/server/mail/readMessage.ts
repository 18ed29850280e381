/** Reads a message of RFC 5322 and MIME, as far as messages of our own make use of them. Pure. */

export interface ReadMessage {
  sender: string;
  subject: string;
  text: string;
  html: string;
}

interface Part {
  headers: Map<string, string>;
  body: string;
}

/** Headers in lower case, unfolded; the body as it stands. @param raw one character a byte (latin1). */
function split(raw: string): Part {
  const end = /\r?\n\r?\n/.exec(raw);
  const head = end ? raw.slice(0, end.index) : raw;
  const headers = new Map<string, string>();
  for (const line of head.replace(/\r?\n[ \t]+/g, ' ').split(/\r?\n/)) {
    const colon = line.indexOf(':');
    if (colon > 0) headers.set(line.slice(0, colon).trim().toLowerCase(), line.slice(colon + 1).trim());
  }
  return { headers, body: end ? raw.slice(end.index + end[0].length) : '' };
}

function quotedPrintable(body: string): Buffer {
  const joined = body.replace(/[ \t]*\r?\n/g, '\n').replace(/=\n/g, '');
  const bytes = joined.replace(/=([0-9A-Fa-f]{2})/g, (_, hex: string) => String.fromCharCode(parseInt(hex, 16)));
  return Buffer.from(bytes, 'latin1');
}

function decode(part: Part): string {
  const encoding = (part.headers.get('content-transfer-encoding') ?? '7bit').toLowerCase();
  if (encoding === 'base64') return Buffer.from(part.body, 'base64').toString('utf8');
  if (encoding === 'quoted-printable') return quotedPrintable(part.body).toString('utf8');
  return Buffer.from(part.body, 'latin1').toString('utf8');
}

/** Encoded words of RFC 2047, of which neighbours are joined before they are read as UTF-8. */
function decodeHeader(value: string): string {
  const joined = value.replace(/(\?=)\s+(=\?)/g, '$1$2');
  return joined.replace(/(?:=\?utf-8\?[bq]\?[^?]*\?=)+/gi, (run) => {
    const words = [...run.matchAll(/=\?utf-8\?([bq])\?([^?]*)\?=/gi)];
    const bytes = words.map(([, kind = '', text = '']) =>
      kind.toLowerCase() === 'b' ? Buffer.from(text, 'base64') : quotedPrintable(text.replace(/_/g, ' '))
    );
    return Buffer.concat(bytes).toString('utf8');
  });
}

function leaves(part: Part): Part[] {
  const type = part.headers.get('content-type') ?? 'text/plain';
  const boundary = /^multipart\//i.test(type) ? /boundary="?([^";]+)"?/i.exec(type)?.[1] : undefined;
  if (!boundary) return [part];
  return part.body
    .split(`--${boundary}`)
    .slice(1, -1)
    .flatMap((inner) => leaves(split(inner.replace(/^\r?\n/, '').replace(/\r?\n$/, ''))));
}

/** The sender, the subject and the bodies of a message. @param raw the message with one character a byte (latin1). */
export function readMessage(raw: string): ReadMessage {
  const message = split(raw);
  const parts = leaves(message);
  const body = (type: RegExp, orElse = false) => {
    const found = parts.find((part) => type.test(part.headers.get('content-type') ?? 'text/plain'));
    return found ? decode(found).replace(/\r\n/g, '\n').trimEnd() : orElse ? decode(message) : '';
  };
  return {
    sender: decodeHeader(message.headers.get('from') ?? ''),
    subject: decodeHeader(message.headers.get('subject') ?? ''),
    text: body(/^text\/plain/i, true),
    html: body(/^text\/html/i)
  };
}
