/** Bytes of standard base64 text without blanks (RFC 4648); browsers and Node share no decoder. Other characters count as 'A'. */
export function decodeBase64(text: string): Uint8Array {
  const alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';
  const values = new Uint8Array(128);
  for (let i = 0; i < 64; i++) values[alphabet.charCodeAt(i)] = i;
  const length = Math.floor((3 * text.replace(/=+$/, '').length) / 4);
  const bytes = new Uint8Array(length);
  for (let i = 0, at = 0; at < length; i += 4) {
    const group =
      (values[text.charCodeAt(i)] << 18) |
      (values[text.charCodeAt(i + 1)] << 12) |
      (values[text.charCodeAt(i + 2)] << 6) |
      values[text.charCodeAt(i + 3)];
    bytes[at++] = group >> 16;
    if (at < length) bytes[at++] = (group >> 8) & 255;
    if (at < length) bytes[at++] = group & 255;
  }
  return bytes;
}
