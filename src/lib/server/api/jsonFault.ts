/** Where a text stops being JSON (RFC 8259): the parser of the language does not always say. */

export interface JsonFault {
  /** From 1, as editors count. */
  line: number;
  column: number;
}

const DIGIT = /[0-9]/;
const SPACE = /[ \t\r\n]/;
const ESCAPED = '"\\/bfnrt';

/** Reads pieces of a text from `at` on; a piece that does not fit leaves `at` on the first character that is wrong. */
class Scanner {
  at = 0;

  constructor(private readonly text: string) {}

  get next(): string {
    return this.text[this.at] ?? '';
  }

  skipSpace(): void {
    while (SPACE.test(this.next)) this.at += 1;
  }

  word(word: string): boolean {
    for (const letter of word) {
      if (this.next !== letter) return false;
      this.at += 1;
    }
    return true;
  }

  private digits(): boolean {
    if (!DIGIT.test(this.next)) return false;
    while (DIGIT.test(this.next)) this.at += 1;
    return true;
  }

  private number(): boolean {
    if (this.next === '-') this.at += 1;
    if (this.next === '0') this.at += 1;
    else if (!this.digits()) return false;
    if (this.next === '.') {
      this.at += 1;
      if (!this.digits()) return false;
    }
    if (!/[eE]/.test(this.next)) return true;
    this.at += 1;
    if (/[+-]/.test(this.next)) this.at += 1;
    return this.digits();
  }

  string(): boolean {
    if (!this.word('"')) return false;
    for (;;) {
      const letter = this.next;
      if (letter === '"') return this.word('"');
      if (letter === '' || letter < ' ') return false;
      this.at += 1;
      if (letter !== '\\') continue;
      const escaped = this.next;
      if (escaped !== 'u' && (escaped === '' || !ESCAPED.includes(escaped))) return false;
      this.at += 1;
      for (let i = 0; escaped === 'u' && i < 4; i += 1, this.at += 1) {
        if (!/[0-9a-fA-F]/.test(this.next)) return false;
      }
    }
  }

  /** A text, a number or one of the three words. */
  scalar(): boolean {
    if (this.next === '"') return this.string();
    if (this.next === 't') return this.word('true');
    if (this.next === 'f') return this.word('false');
    if (this.next === 'n') return this.word('null');
    return this.number();
  }
}

/** Moves the scanner over one document; false leaves it on the fault. Keeps its own stack, so that depth costs nothing. */
function scan(scanner: Scanner): boolean {
  const open: ('{' | '[')[] = [];
  const key = (): boolean => {
    scanner.skipSpace();
    if (!scanner.string()) return false;
    scanner.skipSpace();
    return scanner.word(':');
  };
  for (;;) {
    scanner.skipSpace();
    const first = scanner.next;
    if (first === '{' || first === '[') {
      scanner.at += 1;
      scanner.skipSpace();
      if (scanner.next !== (first === '{' ? '}' : ']')) {
        open.push(first);
        if (first === '{' && !key()) return false;
        continue;
      }
      scanner.at += 1;
    } else if (!scanner.scalar()) return false;
    // A value has ended: whatever it completes ends with it.
    for (;;) {
      scanner.skipSpace();
      const around = open.at(-1);
      if (around === undefined) return scanner.next === '';
      if (scanner.next === ',') break;
      if (!scanner.word(around === '{' ? '}' : ']')) return false;
      open.pop();
    }
    scanner.at += 1;
    if (open.at(-1) === '{' && !key()) return false;
  }
}

/** The place of the first character that does not fit; null where there is none. Takes time in proportion to the text. */
export function jsonFault(text: string): JsonFault | null {
  const scanner = new Scanner(text);
  if (scan(scanner)) return null;
  const before = text.slice(0, scanner.at).split(/\r\n|\r|\n/);
  return { line: before.length, column: (before.at(-1)?.length ?? 0) + 1 };
}
