// Reads bytes that stand in the page as text of 96 characters, as web/site/src/printable.rs writes them.

// How many numbers of two characters 13 bits leave over.
const SPARE = 96 * 96 - 8192;

/** The bytes of a text: 13 or 14 bits in two characters, the last six or fewer in one. */
export function fromPrintable(text) {
  const pairs = text.length >> 1;
  const last = text.length % 2;
  const bytes = new Uint8Array((14 * pairs + 6 * last) >> 3);
  // The characters from the space on without "<", the tab, the end of a line.
  const value = (place) => {
    const code = text.charCodeAt(place);
    return code < 32 ? code + 85 : code - (code < 60 ? 32 : 33);
  };
  let held = 0;
  let count = 0;
  let place = 0;
  for (let pair = 0; pair < pairs + last; pair += 1) {
    const whole = pair < pairs;
    const low = value(2 * pair) + (whole ? 96 * value(2 * pair + 1) : 0);
    held |= low << count;
    for (count += whole ? ((low & 8191) < SPARE ? 14 : 13) : 6; count >= 8; count -= 8) {
      bytes[place++] = held;
      held >>>= 8;
    }
  }
  return bytes.subarray(0, place);
}
