/** Typed arrays one after another in one block of bytes, with a table of their lengths for the check on the way back. */
type Packable = Float64Array | Float32Array;

const bytesOf = (array: Packable): Uint8Array =>
  new Uint8Array(array.buffer, array.byteOffset, array.byteLength);

export function packArrays(arrays: readonly Packable[]): Uint8Array {
  const header = new Float64Array(1 + arrays.length);
  header[0] = arrays.length;
  arrays.forEach((array, index) => {
    header[index + 1] = array.byteLength;
  });
  const total = header.byteLength + arrays.reduce((sum, array) => sum + array.byteLength, 0);
  const packed = new Uint8Array(total);
  packed.set(bytesOf(header), 0);
  let offset = header.byteLength;
  for (const array of arrays) {
    packed.set(bytesOf(array), offset);
    offset += array.byteLength;
  }
  return packed;
}

/** Fills `arrays` from what `packArrays` wrote. Throws a RangeError where count or sizes differ. */
export function unpackArrays(packed: Uint8Array, arrays: readonly Packable[]): void {
  const header = new Float64Array(1 + arrays.length);
  if (packed.byteLength < header.byteLength) throw new RangeError("The snapshot is cut short.");
  bytesOf(header).set(packed.subarray(0, header.byteLength));
  const fits =
    header[0] === arrays.length && arrays.every((array, index) => header[index + 1] === array.byteLength);
  const total = header.byteLength + arrays.reduce((sum, array) => sum + array.byteLength, 0);
  if (!fits || total !== packed.byteLength) {
    throw new RangeError("The snapshot belongs to another lattice, precision, set of edges or of media.");
  }
  let offset = header.byteLength;
  for (const array of arrays) {
    bytesOf(array).set(packed.subarray(offset, offset + array.byteLength));
    offset += array.byteLength;
  }
}
