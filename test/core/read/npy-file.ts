/** A .npy file (format version 1.0) with the given type, order flag, shape text and data. */
export function npyFile(descr: string, shape: string, data: Uint8Array, fortran = false): Uint8Array {
  const dictionary = `{'descr': '${descr}', 'fortran_order': ${fortran ? 'True' : 'False'}, 'shape': (${shape}), }`
  const header = `${dictionary.padEnd(Math.ceil((dictionary.length + 11) / 64) * 64 - 11)}\n`
  const bytes = new Uint8Array(10 + header.length + data.length)
  bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, header.length & 255, header.length >> 8])
  bytes.set(new TextEncoder().encode(header), 10)
  bytes.set(data, 10 + header.length)
  return bytes
}

/** Whole numbers of 0 to 2048 in half precision (IEEE 754): those are exact. */
function halfBits(value: number): number {
  if (!(Number.isInteger(value) && value >= 0 && value <= 2048))
    throw new RangeError(`${value} is not written in half precision`)
  if (value === 0) return 0
  const exponent = Math.floor(Math.log2(value))
  return ((exponent + 15) << 10) | ((value / 2 ** exponent - 1) * 1024)
}

/** Numbers as the bytes of a NumPy type. Values beyond the type wrap or round as a DataView does. */
export function itemBytes(descr: string, values: readonly number[]): Uint8Array {
  const size = Number(descr[2])
  const view = new DataView(new ArrayBuffer(values.length * size))
  const little = descr[0] !== '>'
  values.forEach((value, i) => {
    const at = i * size
    if (descr[1] === 'f' && size === 2) view.setUint16(at, halfBits(value), little)
    else if (descr[1] === 'f' && size === 4) view.setFloat32(at, value, little)
    else if (descr[1] === 'f') view.setFloat64(at, value, little)
    else if (size === 1) view.setUint8(at, value)
    else if (size === 2) view.setUint16(at, value, little)
    else if (size === 4) view.setUint32(at, value, little)
    else view.setBigInt64(at, BigInt(value), little)
  })
  return new Uint8Array(view.buffer)
}
