/** Longest text that is looked at; a name or a word beyond it is cut before anything is measured. */
const MAX_CHARACTERS = 4000;

/** Controls, format characters (bidi overrides, zero-width marks, tags), private use and lone surrogates. */
const UNPRINTABLE = /[\p{Cc}\p{Cf}\p{Co}\p{Cs}\p{Cn}]/gu;
const VARIATION = /[\ufe00-\ufe0f\u{e0100}-\u{e01ef}]/gu;

/**
 * Text from people made fit to print: NFC, one kind of space, no control or format characters, no bidi overrides, no lone
 * surrogates, at most two combining marks on a letter. Line breaks become spaces.
 */
export function cleanText(text: string, maxCharacters = MAX_CHARACTERS): string {
  return text
    .slice(0, maxCharacters * 2)
    .normalize('NFC')
    .replace(/[\t\n\v\f\r\u0085\u2028\u2029]/g, ' ')
    .replace(UNPRINTABLE, '')
    .replace(VARIATION, '')
    .replace(/(\p{M}{2})\p{M}+/gu, '$1')
    .replace(/[ \u1680\u2000-\u200a\u205f\u3000]+/g, ' ');
}
