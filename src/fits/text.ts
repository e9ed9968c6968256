/** Bytes as text, one character a byte (ISO 8859-1). */
export function textOf(bytes: Uint8Array, start = 0, end = bytes.length): string {
  return Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length).toString('latin1', start, end)
}

/** Text up to its first NUL, without trailing blanks; bytes outside printable ASCII as '?'. */
export function trimmedText(text: string): string {
  const end = text.indexOf('\0')
  return (end < 0 ? text : text.slice(0, end)).trimEnd().replace(/[^\x20-\x7e]/g, '?')
}
