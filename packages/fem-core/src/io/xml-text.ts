// What XML 1.0 cannot hold at all: control characters, halves of surrogate pairs, the two non-characters of the plane.
// biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for
const notInXml = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|\p{Surrogate}/gu;

const entities: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

/** Replaces what an XML 1.0 document cannot hold by U+FFFD. */
export function replaceNonXml(text: string): string {
  return text.replace(notInXml, '\ufffd');
}

/** `text` made safe as content or as a quoted attribute of XML, SVG or HTML. */
export function escapeXml(text: string): string {
  return replaceNonXml(text).replace(/[&<>"']/g, (character) => entities[character]);
}
