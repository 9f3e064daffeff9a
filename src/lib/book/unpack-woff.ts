const WOFF_SIGNATURE = 0x774f4646;
const HEADER = 44;
const ENTRY = 20;
const MAX_TABLES = 64;
const MAX_SFNT_BYTES = 16_000_000;

interface Table {
  tag: number;
  checksum: number;
  bytes: Uint8Array;
}

const align = (length: number) => (length + 3) & ~3;

/**
 * Unpacks a WOFF 1.0 font (W3C recommendation of 2012) to the plain sfnt that PDF readers and subsetting want.
 * `inflate` undoes zlib compression, so that this runs wherever the caller has one.
 *
 * @returns the font as a .ttf or .otf file; bytes that are a plain font already are returned as they are
 * @throws RangeError when the bytes are neither, are cut short, or would unpack to more than 16 MB
 */
export function unpackWoff(woff: Uint8Array, inflate: (bytes: Uint8Array) => Uint8Array): Uint8Array {
  if (woff.length < HEADER) throw new RangeError('a font file of fewer than 44 bytes');
  const view = new DataView(woff.buffer, woff.byteOffset, woff.byteLength);
  const signature = view.getUint32(0);
  if (signature === 0x00010000 || signature === 0x4f54544f) return woff;
  if (signature !== WOFF_SIGNATURE) throw new RangeError('not a WOFF 1.0 font');
  const flavour = view.getUint32(4);
  const count = view.getUint16(12);
  if (count === 0 || count > MAX_TABLES || HEADER + count * ENTRY > woff.length)
    throw new RangeError(`a font with ${count} tables`);

  const tables: Table[] = [];
  let total = 12 + count * 16;
  for (let index = 0; index < count; index += 1) {
    const at = HEADER + index * ENTRY;
    const offset = view.getUint32(at + 4);
    const packed = view.getUint32(at + 8);
    const length = view.getUint32(at + 12);
    total += align(length);
    if (offset + packed > woff.length || packed > length || total > MAX_SFNT_BYTES)
      throw new RangeError('a font table outside its file');
    const stored = woff.subarray(offset, offset + packed);
    const bytes = packed < length ? inflate(stored) : stored;
    if (bytes.length !== length) throw new RangeError('a font table of the wrong length');
    tables.push({ tag: view.getUint32(at), checksum: view.getUint32(at + 16), bytes });
  }
  return writeSfnt(flavour, tables, total);
}

function writeSfnt(flavour: number, tables: readonly Table[], total: number): Uint8Array {
  const sfnt = new Uint8Array(total);
  const out = new DataView(sfnt.buffer);
  const count = tables.length;
  const power = Math.floor(Math.log2(count));
  out.setUint32(0, flavour);
  out.setUint16(4, count);
  // The three numbers that old readers search the table directory by.
  out.setUint16(6, 2 ** power * 16);
  out.setUint16(8, power);
  out.setUint16(10, count * 16 - 2 ** power * 16);
  let offset = 12 + count * 16;
  tables.forEach((table, index) => {
    const at = 12 + index * 16;
    out.setUint32(at, table.tag);
    out.setUint32(at + 4, table.checksum);
    out.setUint32(at + 8, offset);
    out.setUint32(at + 12, table.bytes.length);
    sfnt.set(table.bytes, offset);
    offset += align(table.bytes.length);
  });
  return sfnt;
}
