import { deflateSync } from 'node:zlib'

/** Objects in one object stream: large enough to compress well, small enough to find one quickly. */
const OBJECTS_IN_STREAM = 200

interface Entry {
  readonly id: number
  readonly offset: number
}

/**
 * The same PDF with its small objects packed in compressed object streams and a cross-reference stream (ISO 32000-1,
 * 7.5.7 and 7.5.8). A tagged page has an object for every table cell, and as plain text they outweigh the drawing.
 * Takes a file with one classical cross-reference table and no encryption, as pdfkit writes it.
 *
 * @throws RangeError when the file is not of that kind
 */
export function compactPdf(bytes: Uint8Array): Uint8Array {
  const source = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  const { entries, trailer, tableOffset } = readTable(source)
  const inOrder = [...entries].sort((a, b) => a.offset - b.offset)
  const parts: Buffer[] = [source.subarray(0, inOrder[0]?.offset ?? tableOffset)]
  const places = new Map<number, readonly [1, number] | readonly [2, number, number]>()
  const small: { readonly id: number; readonly body: Buffer }[] = []
  let at = parts[0].length
  inOrder.forEach(({ id, offset }, k) => {
    const end = inOrder[k + 1]?.offset ?? tableOffset
    const object = source.subarray(offset, end)
    const from = object.indexOf('obj') + 3
    const until = object.lastIndexOf('endobj')
    const body = object.subarray(from, until)
    if (body.lastIndexOf('endstream') >= 0) {
      places.set(id, [1, at])
      parts.push(object)
      at += object.length
    } else small.push({ id, body: Buffer.from(body.toString('latin1').trim(), 'latin1') })
  })
  let next = Math.max(0, ...entries.map((e) => e.id)) + 1
  for (let first = 0; first < small.length; first += OBJECTS_IN_STREAM) {
    const group = small.slice(first, first + OBJECTS_IN_STREAM)
    group.forEach(({ id }, i) => places.set(id, [2, next, i]))
    const stream = objectStream(next, group)
    places.set(next, [1, at])
    parts.push(stream)
    at += stream.length
    next++
  }
  places.set(next, [1, at])
  parts.push(crossReference(next, places, trailer), Buffer.from(`startxref\n${at}\n%%EOF\n`, 'latin1'))
  return new Uint8Array(Buffer.concat(parts))
}

function readTable(source: Buffer): {
  readonly entries: readonly Entry[]
  readonly trailer: string
  readonly tableOffset: number
} {
  const tail = source.subarray(Math.max(0, source.length - 64)).toString('latin1')
  const tableOffset = Number(/startxref\s+(\d+)/.exec(tail)?.[1])
  const text = source.subarray(tableOffset).toString('latin1')
  const head = /^xref\s+0 (\d+)\s+/.exec(text)
  if (!head) throw new RangeError('compactPdf requires one classical cross-reference table, got none')
  const entries: Entry[] = []
  for (let id = 1; id < Number(head[1]); id++) {
    const line = text.slice(head[0].length + 20 * id, head[0].length + 20 * id + 20)
    if (line[17] === 'n') entries.push({ id, offset: Number(line.slice(0, 10)) })
  }
  const from = text.indexOf('<<', text.indexOf('trailer')) + 2
  return { entries, trailer: text.slice(from, text.lastIndexOf('>>')), tableOffset }
}

function objectStream(id: number, group: readonly { readonly id: number; readonly body: Buffer }[]): Buffer {
  let offset = 0
  const index = group.map(({ id: of, body }) => {
    const entry = `${of} ${offset}`
    offset += body.length + 1
    return entry
  })
  const head = Buffer.from(index.join(' ') + '\n', 'latin1')
  const newline = Buffer.from('\n', 'latin1')
  const data = deflateSync(Buffer.concat([head, ...group.flatMap(({ body }) => [body, newline])]))
  return streamObject(id, `/Type /ObjStm /N ${group.length} /First ${head.length}`, data)
}

function streamObject(id: number, entries: string, data: Buffer): Buffer {
  const head = `${id} 0 obj\n<< ${entries} /Filter /FlateDecode /Length ${data.length} >>\nstream\n`
  return Buffer.concat([Buffer.from(head, 'latin1'), data, Buffer.from('\nendstream\nendobj\n', 'latin1')])
}

function crossReference(
  id: number,
  places: ReadonlyMap<number, readonly [1, number] | readonly [2, number, number]>,
  trailer: string,
): Buffer {
  const table = Buffer.alloc(7 * (id + 1))
  table.writeUInt16BE(65535, 5)
  for (const [of, [kind, where, index = 0]] of places) {
    table.writeUInt8(kind, 7 * of)
    table.writeUInt32BE(where, 7 * of + 1)
    table.writeUInt16BE(index, 7 * of + 5)
  }
  const kept = trailer.replace(/\/Size\s+\d+/, '').trim()
  return streamObject(id, `/Type /XRef /Size ${id + 1} /W [1 4 2] ${kept}`, deflateSync(table))
}
