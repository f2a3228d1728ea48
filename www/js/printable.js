// Reads bytes that stand in the page as text of 96 characters, as web/site/src/printable.rs writes them.

// How many numbers of two characters 13 bits leave over.
const SPARE = 96 * 96 - 8192;

// What each character stands for: those from the space on without "<", then the tab and the end of a line.
const VALUES = new Uint8Array(128);
let known = 0;
for (let code = 32; code < 127; code += 1) if (code !== 60) VALUES[code] = known++;
VALUES[9] = known++;
VALUES[10] = known;

/** The bytes of a text: 13 or 14 bits in two characters, the last six or fewer in one. */
export function fromPrintable(text) {
  // Bytes are read several times faster than characters while nothing is compiled for this loop yet.
  const written = new TextEncoder().encode(text);
  const paired = written.length & ~1;
  const bytes = new Uint8Array((14 * (paired >> 1) + 6 * (written.length - paired)) >> 3);
  let held = 0;
  let count = 0;
  let place = 0;
  for (let at = 0; at < paired; at += 2) {
    const low = VALUES[written[at]] + 96 * VALUES[written[at + 1]];
    held |= low << count;
    count += (low & 8191) < SPARE ? 14 : 13;
    bytes[place++] = held;
    held >>>= 8;
    count -= 8;
    if (count >= 8) {
      bytes[place++] = held;
      held >>>= 8;
      count -= 8;
    }
  }
  // Fewer than eight bits are left over, so that one character ends at most one byte.
  if (paired < written.length) {
    bytes[place] = held | VALUES[written[paired]] << count;
    if (count + 6 >= 8) place += 1;
  }
  return bytes.subarray(0, place);
}
