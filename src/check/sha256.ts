/** SHA-256 of ASCII text, FIPS 180-4 (2015), in 32-bit integers: works without a module in Node and in a browser. */

const primes: number[] = [];
for (let n = 2; primes.length < 64; n++) if (primes.every((q) => n % q !== 0)) primes.push(n);

/** The first 32 bits of the fractional part of n^(1/root), by integer arithmetic: floor(n^(1/root)·2^32) mod 2^32. */
function fraction(n: number, root: number): number {
  const target = BigInt(n) << BigInt(32 * root);
  let value = 0n;
  for (let bit = 1n << 40n; bit > 0n; bit >>= 1n) if ((value + bit) ** BigInt(root) <= target) value += bit;
  return Number(value & 0xffffffffn);
}

const INITIAL = primes.slice(0, 8).map((q) => fraction(q, 2));
const ROUND = primes.map((q) => fraction(q, 3));

/** 64 hexadecimal digits. @throws RangeError when the text holds a character beyond ASCII, which would be several bytes */
export function sha256(text: string): string {
  const blocks = Math.ceil((text.length + 9) / 64);
  const state = Uint32Array.from(INITIAL);
  const w = new Uint32Array(64);
  const byte = (i: number): number => {
    if (i > text.length) return 0;
    if (i === text.length) return 0x80;
    const code = text.charCodeAt(i);
    if (code > 127) throw new RangeError('not ASCII');
    return code;
  };
  const rotate = (x: number, by: number): number => (x >>> by) | (x << (32 - by));
  for (let block = 0; block < blocks; block++) {
    for (let i = 0; i < 16; i++) {
      const at = 64 * block + 4 * i;
      w[i] = (byte(at) << 24) | (byte(at + 1) << 16) | (byte(at + 2) << 8) | byte(at + 3);
    }
    if (block === blocks - 1) {
      // The length in bits, as 64 bits, ends the last block.
      w[14] = Math.floor((text.length * 8) / 2 ** 32);
      w[15] = text.length * 8;
    }
    for (let i = 16; i < 64; i++) {
      const x = w[i - 15]!;
      const y = w[i - 2]!;
      const s0 = rotate(x, 7) ^ rotate(x, 18) ^ (x >>> 3);
      const s1 = rotate(y, 17) ^ rotate(y, 19) ^ (y >>> 10);
      w[i] = w[i - 16]! + s0 + w[i - 7]! + s1;
    }
    let [a, b, c, d, e, f, g, h] = state as unknown as [
      number,
      number,
      number,
      number,
      number,
      number,
      number,
      number,
    ];
    for (let i = 0; i < 64; i++) {
      const s1 = rotate(e, 6) ^ rotate(e, 11) ^ rotate(e, 25);
      const t1 = (h + s1 + ((e & f) ^ (~e & g)) + ROUND[i]! + w[i]!) | 0;
      const s0 = rotate(a, 2) ^ rotate(a, 13) ^ rotate(a, 22);
      const t2 = (s0 + ((a & b) ^ (a & c) ^ (b & c))) | 0;
      [h, g, f, e, d, c, b, a] = [g, f, e, (d + t1) | 0, c, b, a, (t1 + t2) | 0];
    }
    [a, b, c, d, e, f, g, h].forEach((value, i) => {
      state[i] = state[i]! + value;
    });
  }
  return [...state].map((value) => value.toString(16).padStart(8, '0')).join('');
}
