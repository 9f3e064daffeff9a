import { readFileSync } from 'node:fs';
import { inflateSync } from 'node:zlib';
import fontkit from '@pdf-lib/fontkit';
import { describe, expect, it } from 'vitest';
import { unpackWoff } from '#lib/book/unpack-woff.ts';

const woff = readFileSync('node_modules/@fontsource/literata/files/literata-latin-400-normal.woff');
const inflate = (bytes: Uint8Array) => new Uint8Array(inflateSync(bytes));

describe('unpacking a WOFF font', () => {
  it('gives a plain font with the same characters and widths', () => {
    const [packed, plain] = [fontkit.create(woff), fontkit.create(unpackWoff(woff, inflate))];
    expect(plain.characterSet).toEqual(packed.characterSet);
    expect(plain.layout('Fit 17 ¾').advanceWidth).toBe(packed.layout('Fit 17 ¾').advanceWidth);
  });

  it('gives tables that add up to the checksums in their directory (OpenType, table directory)', () => {
    const sfnt = unpackWoff(woff, inflate);
    const view = new DataView(sfnt.buffer);
    expect(view.getUint32(0)).toBe(0x00010000);
    for (let index = 0; index < view.getUint16(4); index += 1) {
      const at = 12 + index * 16;
      // The head table holds a sum over the whole file and is left out, as the specification says.
      if (view.getUint32(at) === 0x68656164) continue;
      let sum = 0;
      const offset = view.getUint32(at + 8);
      for (let i = 0; i < view.getUint32(at + 12); i += 4) sum = (sum + view.getUint32(offset + i)) >>> 0;
      expect(sum).toBe(view.getUint32(at + 4));
    }
  });

  it('leaves a plain font as it is', () => {
    const plain = unpackWoff(woff, inflate);
    expect(unpackWoff(plain, inflate)).toBe(plain);
  });

  it('refuses a font that is cut short, a WOFF 2 font and other bytes', () => {
    const second = readFileSync('node_modules/@fontsource/literata/files/literata-latin-400-normal.woff2');
    for (const bytes of [
      woff.subarray(0, 300),
      woff.subarray(0, 20),
      new Uint8Array(second),
      new Uint8Array(80),
    ])
      expect(() => unpackWoff(bytes, inflate)).toThrow(RangeError);
  });
});
