/**
 * A typed array of big-endian values, in the machine's order. `bytes` is copied, never changed.
 *
 * @param bytes  count x size bytes
 */
export function int16Of(bytes: Uint8Array): Int16Array {
  return new Int16Array(native(bytes, 2))
}

/** As `int16Of`, for 32-bit integers. */
export function int32Of(bytes: Uint8Array): Int32Array {
  return new Int32Array(native(bytes, 4))
}

/** As `int16Of`, for 64-bit integers. */
export function int64Of(bytes: Uint8Array): BigInt64Array {
  return new BigInt64Array(native(bytes, 8))
}

/** As `int16Of`, for single-precision numbers. */
export function float32Of(bytes: Uint8Array): Float32Array {
  return new Float32Array(native(bytes, 4))
}

/** As `int16Of`, for double-precision numbers. */
export function float64Of(bytes: Uint8Array): Float64Array {
  return new Float64Array(native(bytes, 8))
}

const LITTLE_ENDIAN = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1

function native(bytes: Uint8Array, size: 2 | 4 | 8): ArrayBuffer {
  const copy = new Uint8Array(bytes.length - (bytes.length % size))
  copy.set(copy.length === bytes.length ? bytes : bytes.subarray(0, copy.length))
  if (LITTLE_ENDIAN) {
    const view = Buffer.from(copy.buffer)
    if (size === 2) view.swap16()
    else if (size === 4) view.swap32()
    else view.swap64()
  }
  return copy.buffer
}

/** The bytes of a typed array in big-endian order; a copy. */
export function bigEndianOf(
  values: Int16Array | Int32Array | BigInt64Array | BigUint64Array | Float32Array | Float64Array,
): Uint8Array {
  const bytes = new Uint8Array(values.buffer, values.byteOffset, values.byteLength)
  return new Uint8Array(native(bytes, values.BYTES_PER_ELEMENT as 2 | 4 | 8))
}
