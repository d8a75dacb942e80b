/** Doubles as stored bytes, little-endian as every machine that runs this. No copy is made. */
export function toBytes(values: Float64Array): Buffer {
  return Buffer.from(values.buffer, values.byteOffset, values.byteLength);
}

/** Stored bytes as doubles; copied, since a driver's buffer needn't be aligned. */
export function toDoubles(bytes: Uint8Array): Float64Array {
  const values = new Float64Array(bytes.byteLength / 8);
  new Uint8Array(values.buffer).set(bytes);
  return values;
}
