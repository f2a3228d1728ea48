// Reads bytes that stand in the page as text of 91 characters, as web/site/src/printable.rs writes them.

/** The bytes of a text: 13 bits in two characters, the last six or fewer in one. */
export function fromPrintable(text) {
  const values = new Uint8Array(128);
  let next = 0;
  for (let code = 33; code < 127; code += 1) if (!"<>&".includes(String.fromCharCode(code))) values[code] = next++;
  const pairs = text.length >> 1;
  const last = text.length % 2;
  const bytes = new Uint8Array(Math.floor((13 * pairs + 6 * last) / 8));
  let held = 0;
  let count = 0;
  let place = 0;
  for (let pair = 0; pair < pairs + last; pair += 1) {
    const high = pair < pairs ? values[text.charCodeAt(2 * pair + 1)] : 0;
    held |= (values[text.charCodeAt(2 * pair)] + 91 * high) << count;
    for (count += pair < pairs ? 13 : 6; count >= 8; count -= 8) {
      bytes[place++] = held;
      held >>>= 8;
    }
  }
  return bytes;
}
