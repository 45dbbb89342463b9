/**
 * Text into XML 1.0 so that a parser gives back the same text.
 *
 * Characters that XML 1.0 cannot hold even escaped (section 2.2: control characters other than tab, LF and CR, lone
 * surrogates, U+FFFE, U+FFFF) are replaced by U+FFFD, the replacement character. CR is written as a reference because parsers
 * turn a literal one into LF (section 2.11); tab, LF and CR in attributes because parsers turn them into spaces (3.3.3).
 */

// With the u flag a lone surrogate matches \p{Cs}; a pair does not.
const ILLEGAL = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|\p{Cs}/gu
const NEEDS_CARE = /[&<>"'\u0000-\u001f\ud800-\udfff\ufffe\uffff]/

const REFERENCES: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  '\t': '&#9;',
  '\n': '&#10;',
  '\r': '&#13;',
}

/** Text with the characters that XML 1.0 cannot hold replaced by U+FFFD. */
export function replaceIllegal(text: string): string {
  return text.replace(ILLEGAL, '\ufffd')
}

/** For the inside of an element and of a double-quoted attribute alike. */
export function escapeXml(text: string): string {
  if (!NEEDS_CARE.test(text)) return text
  return replaceIllegal(text).replace(/[&<>"\t\n\r]/g, (character) => REFERENCES[character])
}
