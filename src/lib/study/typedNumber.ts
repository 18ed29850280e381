/**
 * A number as a person types it: spaces between thousands, a decimal comma or point, a true minus, `1e-3`.
 * @returns the number, or a sentence that says what to type instead. Never throws and never guesses: `1,234` could be either.
 */
export type TypedNumber = { ok: true; value: number } | { ok: false; message: string };

export function typedNumber(text: string): TypedNumber {
  const tidy = text
    .trim()
    .replace(/[\u2212\u2013]/g, '-')
    .replace(/(\d)[ \u00a0\u2009\u202f](?=\d{3}(\D|$))/g, '$1');
  if (tidy === '') return { ok: false, message: 'Give a number.' };
  if (/^[+-]?\d{1,3}(,\d{3})+$/.test(tidy)) {
    const plain = tidy.replace(/,/g, '');
    const decimal = tidy.replace(',', '.');
    return {
      ok: false,
      message:
        tidy.match(/,/g)?.length === 1
          ? `Write ${plain} or ${decimal}: the comma could mean either.`
          : `Write ${plain}.`
    };
  }
  const pointed = tidy.includes('.') ? tidy : tidy.replace(',', '.');
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(pointed))
    return { ok: false, message: `“${text.trim().slice(0, 40)}” is not a number.` };
  const value = Number(pointed);
  if (!Number.isFinite(value))
    return { ok: false, message: `${text.trim().slice(0, 40)} is too large to compute with.` };
  return { ok: true, value };
}
