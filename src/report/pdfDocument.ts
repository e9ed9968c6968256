import type { Font } from 'fontkit'
import PDFDocument from 'pdfkit'
import type { Weight } from './drawing.ts'

/** A structure element of pdfkit. */
export interface Structure {
  add(child: Structure | (() => void)): Structure
  end(): void
}

/** An entry of the bookmarks, to which others are added. */
export interface Outline {
  addItem(title: string, options: { expanded: boolean; left: number; top: number }): Outline
}

/** The part of pdfkit 0.20 that pages use; its published types (0.17) know neither PDF/UA nor parsed fonts. */
export interface PdfDocument {
  readonly outline: Outline
  on(event: 'data', listener: (chunk: Uint8Array) => void): void
  on(event: 'end', listener: () => void): void
  on(event: 'error', listener: (error: Error) => void): void
  registerFont(name: Weight, font: Font): void
  addPage(options: { size: readonly [number, number]; margin: number }): void
  struct(type: string, options?: { readonly alt?: string; readonly scope?: 'Column' }): Structure
  addStructure(element: Structure): void
  addNamedDestination(name: string, kind: 'XYZ', x: number, y: number, zoom: null): void
  markContent(tag: 'Artifact', options: { readonly type: 'Layout' }): void
  endMarkedContent(): void
  addContent(operators: string): void
  ref(dictionary: Readonly<Record<string, unknown>>): { end(): void }
  annotate(x: number, y: number, w: number, h: number, options: Readonly<Record<string, unknown>>): void
  font(name: Weight): PdfDocument
  fontSize(size: number): PdfDocument
  fillColor(colour: string): PdfDocument
  text(
    text: string,
    x: number,
    y: number,
    options: {
      readonly lineBreak: false
      readonly baseline: number
      readonly textWidth: number
      readonly wordCount: number
    },
  ): void
  save(): void
  restore(): void
  rotate(angle: number, options: { readonly origin: readonly [number, number] }): void
  end(): void
}

/** What a document is opened with. */
export interface PdfDocumentOptions {
  readonly autoFirstPage: false
  readonly pdfVersion: '1.7'
  readonly subset: 'PDF/UA'
  readonly tagged: true
  readonly lang: string
  readonly displayTitle: true
  /** No default font: one of the standard ones would stand in the file without being embedded. */
  readonly font: null
  readonly info: Readonly<Record<string, string | Date>>
}

/** An empty document of pdfkit. */
export function openPdf(options: PdfDocumentOptions): PdfDocument {
  const Maker = PDFDocument as unknown as new (options: PdfDocumentOptions) => PdfDocument
  return new Maker(options)
}
