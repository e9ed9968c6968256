import type { Block, Drawing, Item, LinkTarget, PathItem, TextItem } from './drawing.ts'
import { compactPdf } from './compactPdf.ts'
import { embeddable } from './embeddable.ts'
import type { PdfDocument, Structure } from './pdfDocument.ts'
import { openPdf } from './pdfDocument.ts'
import type { Fonts } from './typeface.ts'

/** What stands in a document beside its pages. */
export interface PdfMeta {
  /** The date of the run: the only thing that differs between two runs on the same data. */
  readonly date: Date
  readonly version: string
  /** 'en' unless given (BCP 47). */
  readonly language?: string
}

/**
 * The drawing as a tagged PDF 1.7 after PDF/UA-1 (ISO 14289-1): embedded font subsets, structure with alternative text,
 * bookmarks, links and named places. The same drawing, fonts and date give the same bytes.
 */
export function encodePdf(drawing: Drawing, fonts: Fonts, meta: PdfMeta): Promise<Uint8Array> {
  const doc = openPdf({
    autoFirstPage: false,
    pdfVersion: '1.7',
    subset: 'PDF/UA',
    tagged: true,
    lang: meta.language ?? 'en',
    displayTitle: true,
    font: null,
    info: {
      Title: forXml(drawing.title),
      Subject: forXml(drawing.subject),
      Creator: `darkline ${meta.version}`,
      Producer: `darkline ${meta.version} with pdfkit`,
      CreationDate: meta.date,
      ModDate: meta.date,
    },
  })
  const chunks: Uint8Array[] = []
  const done = new Promise<Uint8Array>((resolve, reject) => {
    doc.on('data', (chunk: Uint8Array) => chunks.push(chunk))
    doc.on('end', () => resolve(compactPdf(Buffer.concat(chunks))))
    doc.on('error', reject)
  })
  doc.registerFont('regular', embeddable(fonts.regular))
  doc.registerFont('bold', embeddable(fonts.bold))
  const root = doc.struct('Document')
  doc.addStructure(root)
  let level1 = doc.outline
  for (const page of drawing.pages) {
    doc.addPage({ size: [page.width, page.height], margin: 0 })
    for (const block of page.blocks) {
      const { bookmark, place } = block
      if (bookmark) {
        const parent = bookmark.level === 1 ? doc.outline : level1
        const added = parent.addItem(bookmark.title, {
          expanded: true,
          left: page.width,
          top: bookmark.y,
        })
        if (bookmark.level === 1) level1 = added
      }
      if (place) doc.addNamedDestination(place.name, 'XYZ', 0, place.y, null)
      addBlock(doc, root, block)
    }
  }
  root.end()
  doc.end()
  return done
}

/** pdfkit copies titles into XML metadata as they are; without these characters they stay well-formed. */
const forXml = (text: string): string => text.replaceAll('&', '+').replace(/[<>]/g, ' ')

function addBlock(doc: PdfDocument, root: Structure, block: Block): void {
  if (block.role === 'Artifact') {
    doc.markContent('Artifact', { type: 'Layout' })
    block.items.forEach((item) => drawItem(doc, item))
    doc.endMarkedContent()
    return
  }
  if (block.role === 'Table') {
    const table = doc.struct('Table')
    root.add(table)
    for (const row of block.rows ?? []) {
      const tr = doc.struct('TR')
      table.add(tr)
      for (const { heading, items } of row) {
        const cell = doc.struct(heading ? 'TH' : 'TD', heading ? { scope: 'Column' } : {})
        tr.add(cell)
        addItems(doc, cell, items)
        cell.end()
      }
      tr.end()
    }
    table.end()
    return
  }
  const element = doc.struct(block.role, block.alt === undefined ? {} : { alt: block.alt })
  root.add(element)
  addItems(doc, element, block.items)
  element.end()
}

/** Items into a structure element: runs without links as one marked content, each link as an element of its own. */
function addItems(doc: PdfDocument, element: Structure, items: readonly Item[]): void {
  let run: Item[] = []
  const flush = (): void => {
    if (run.length === 0) return
    const now = run
    run = []
    element.add(() => now.forEach((item) => drawItem(doc, item)))
  }
  for (const item of items) {
    if (item.draw !== 'text' || !item.link) {
      run.push(item)
      continue
    }
    flush()
    addLink(doc, element, item, item.link)
  }
  flush()
}

function addLink(doc: PdfDocument, element: Structure, item: TextItem, target: LinkTarget): void {
  const link = doc.struct('Link')
  element.add(link)
  link.add(() => drawItem(doc, item))
  const left = item.anchor === 'end' ? item.x - item.width : item.anchor === 'middle' ? item.x - item.width / 2 : item.x
  const action = doc.ref(linkAction(target))
  action.end()
  const options = { Subtype: 'Link', A: action, Contents: new String(item.text), structParent: link }
  doc.annotate(left, item.y - item.size, item.width, item.size * 1.25, options)
  link.end()
}

function linkAction(target: LinkTarget): Record<string, unknown> {
  if (target.to === 'place') return { S: 'GoTo', D: new String(target.name) }
  if (target.to === 'address') return { S: 'URI', URI: new String(target.address) }
  return { S: 'GoToR', F: new String(target.address), D: [0, 'Fit'], NewWindow: true }
}

function drawItem(doc: PdfDocument, item: Item): void {
  if (item.draw === 'text') drawText(doc, item)
  else if (item.draw === 'path') doc.addContent(pathContent(item))
  else {
    let fill = ''
    const parts: string[] = []
    const count = item.boxes.length / 4
    for (let i = 0; i < count; i++) {
      const colour = item.fills[Math.min(i, item.fills.length - 1)]
      if (colour !== fill) parts.push((fill === '' ? '' : 'f ') + `${rgb(colour)} rg`)
      fill = colour
      const [x, y, w, h] = item.boxes.subarray(4 * i, 4 * i + 4)
      parts.push(`${short(x)} ${short(y)} ${short(w)} ${short(h)} re`)
    }
    if (parts.length) doc.addContent(`q /DeviceRGB cs ${parts.join(' ')} f Q`)
  }
}

function drawText(doc: PdfDocument, item: TextItem): void {
  const { anchor, width } = item
  const shift = anchor === 'end' ? -width : anchor === 'middle' ? -width / 2 : 0
  doc.font(item.weight).fontSize(item.size).fillColor(item.colour)
  const options = { lineBreak: false, baseline: 0, textWidth: width, wordCount: 1 } as const
  // A space after every piece keeps the words of two pieces apart when the text is read out or copied.
  const text = `${item.text} `
  if (!item.upright) {
    doc.text(text, item.x + shift, item.y, options)
    return
  }
  doc.save()
  doc.rotate(-90, { origin: [item.x, item.y] })
  doc.text(text, item.x + shift, item.y, options)
  doc.restore()
}

function pathContent({ points, stroke, width, dash, fill }: PathItem): string {
  const parts: string[] = ['q']
  if (stroke) parts.push(`${rgb(stroke)} RG ${short(width ?? 0.5)} w 1 j`)
  if (dash) parts.push(`[${dash.map(short).join(' ')}] 0 d`)
  if (fill) parts.push(`${rgb(fill)} rg`)
  let isDown = false
  for (let i = 0; i < points.length; i += 2) {
    if (Number.isNaN(points[i])) {
      isDown = false
      continue
    }
    parts.push(`${short(points[i])} ${short(points[i + 1])} ${isDown ? 'l' : 'm'}`)
    isDown = true
  }
  parts.push(fill && stroke ? 'b' : fill ? 'f' : 'S', 'Q')
  return parts.join(' ')
}

/** A coordinate to a hundredth of a point, without trailing zeros. */
const short = (value: number): string => String(Math.round(value * 100) / 100)

/** '#rrggbb' as the three numbers of PDF. */
function rgb(colour: string): string {
  const value = Number.parseInt(colour.slice(1), 16)
  return [value >> 16, (value >> 8) & 255, value & 255].map((level) => short(level / 255)).join(' ')
}
