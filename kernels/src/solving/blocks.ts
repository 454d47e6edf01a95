/** A JSON header and byte blocks in one array: the form of a snapshot. */
const MARK = 0x48534e31;

export function packBlocks(header: unknown, blocks: readonly Uint8Array[]): Uint8Array {
  const text = new TextEncoder().encode(JSON.stringify(header));
  const lengths = [text.byteLength, ...blocks.map((block) => block.byteLength)];
  const table = new Float64Array([MARK, lengths.length, ...lengths]);
  const total = table.byteLength + lengths.reduce((sum, length) => sum + length, 0);
  const packed = new Uint8Array(total);
  packed.set(new Uint8Array(table.buffer), 0);
  let offset = table.byteLength;
  for (const block of [text, ...blocks]) {
    packed.set(block, offset);
    offset += block.byteLength;
  }
  return packed;
}

/** Throws a RangeError on anything that `packBlocks` did not write. */
export function unpackBlocks(packed: Uint8Array): { header: unknown; blocks: Uint8Array[] } {
  const damaged = new RangeError("The snapshot is damaged or not a snapshot.");
  const numbers = (from: number, count: number): Float64Array => {
    if (packed.byteLength < (from + count) * 8) throw damaged;
    return new Float64Array(packed.slice(from * 8, (from + count) * 8).buffer);
  };
  const [mark, count] = numbers(0, 2);
  if (mark !== MARK || !(count >= 1 && count < 64)) throw damaged;
  const lengths = numbers(2, count);
  let offset = (2 + count) * 8;
  const parts: Uint8Array[] = [];
  for (const length of lengths) {
    if (offset + length > packed.byteLength) throw damaged;
    parts.push(packed.slice(offset, offset + length));
    offset += length;
  }
  return { header: JSON.parse(new TextDecoder().decode(parts[0])) as unknown, blocks: parts.slice(1) };
}
