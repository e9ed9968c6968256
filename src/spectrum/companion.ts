import { readImage } from '../fits/image.ts'
import type { ByteSource, FitsFile, Hdu } from '../fits/types.ts'
import type { Axis, Refusal } from './axis.ts'
import { cardText } from './cards.ts'
import { listedAxis } from './columnAxis.ts'
import { cellNumbers, columnNumbers } from './columnCells.ts'
import { columnRoles } from './columnRoles.ts'
import type { Container } from './container.ts'
import { namePrefix } from './imageRole.ts'
import type { WavelengthLabel } from './medium.ts'
import { planeRole } from './planeRole.ts'
import type { PlaneRole } from './planeRole.ts'

/** Wavelengths that stand apart from the flux, with what they are called; or why they cannot be used. */
export type CompanionAnswer =
  | { readonly axis: Axis; readonly label: WavelengthLabel; readonly hdu: number; readonly perRow: boolean }
  | { readonly refusal: Refusal }

/** The wavelengths of `length` samples from an image extension of the file that its name says to hold them, if any. */
export function siblingAxis(
  container: Container,
  owner: Hdu,
  length: number,
  row: number,
): CompanionAnswer | undefined {
  const prefix = namePrefix(owner.name)
  const images = container.file.hdus.filter((hdu) => hdu !== owner && isWavelengthImage(hdu, length))
  const own =
    images.find((hdu) => namePrefix(hdu.name) === prefix) ??
    (prefix === '' ? images[0] : images.find((hdu) => namePrefix(hdu.name) === ''))
  return own && imageAxis(container, own, length, row)
}

/**
 * The wavelengths of `length` samples from another extension of the file (an image or table column named so), or from
 * the companion file; undefined when there are none of that length.
 *
 * @param row  row of the flux, used where the wavelengths have as many rows
 */
export function companionAxis(
  container: Container,
  owner: Hdu,
  length: number,
  row: number,
): CompanionAnswer | undefined {
  const sibling = siblingAxis(container, owner, length, row)
  if (sibling) return sibling
  const inTable = tableAxis(container.file, container.source, owner, length)
  if (inTable) return inTable
  const { companion } = container
  if (!companion) return undefined
  const image =
    companion.file.hdus.find((hdu) => isWavelengthImage(hdu, length)) ??
    companion.file.hdus.find((hdu) => isImage(hdu) && hdu.dimensions[0] === length)
  const answer =
    tableAxis(companion.file, companion.source, undefined, length) ??
    (image && imageAxis(companion, image, length, row))
  return answer && 'axis' in answer
    ? { ...answer, axis: { ...answer.axis, words: `${answer.axis.words} of the companion file` } }
    : answer
}

function isImage(hdu: Hdu): boolean {
  return hdu.kind === 'image' || hdu.kind === 'compressed image'
}

/** True for an image extension that its name says to hold wavelengths, of `length` samples a row. */
export function isWavelengthImage(hdu: Hdu, length: number): boolean {
  if (!isImage(hdu) || hdu.dimensions[0] !== length) return false
  const role = wavelengthRole(hdu)
  return role === 'wavelength' || role === 'log wavelength'
}

function wavelengthRole(hdu: Hdu): PlaneRole | undefined {
  const prefix = namePrefix(hdu.name)
  return planeRole(prefix === '' ? hdu.name : hdu.name.slice(prefix.length + 1)) ?? planeRole(hdu.name)
}

function imageAxis(
  { file, source }: Pick<Container, 'file' | 'source'>,
  hdu: Hdu,
  length: number,
  row: number,
): CompanionAnswer {
  const rows = hdu.dimensions.slice(1).reduce((product, n) => product * n, 1)
  const values = readImage(source, hdu, { start: row < rows ? row * length : 0, count: length })
  const name = hdu.name === '' ? `HDU ${hdu.index}` : `extension ${hdu.name}`
  const answer = listedAxis(values, {
    name,
    unit: cardText([hdu.header], 'BUNIT') ?? cardText([hdu.header], 'CUNIT1') ?? listedUnit(file) ?? '',
    role: wavelengthRole(hdu) ?? 'wavelength',
    keyword: 'BUNIT',
  })
  if ('refusal' in answer) return { refusal: { ...answer.refusal, hdu: hdu.index } }
  return { axis: answer.axis, label: { name: hdu.name, ucd: '', utype: '' }, hdu: hdu.index, perRow: rows > 1 }
}

/** Unit of the wavelengths from a card that lists the units of all planes, such as `UNITS = {"wave": "Angstrom"}`. */
function listedUnit({ hdus }: FitsFile): string | undefined {
  return /"wave(?:length)?"\s*:\s*"([^"]+)"/i.exec(cardText([hdus[0].header], 'UNITS') ?? '')?.[1]
}

function tableAxis(
  file: FitsFile,
  source: ByteSource,
  owner: Hdu | undefined,
  length: number,
): CompanionAnswer | undefined {
  for (const hdu of file.hdus) {
    if (hdu === owner || hdu.columns.length === 0) continue
    for (const { column, role } of columnRoles(hdu.columns)) {
      if (role !== 'wavelength' && role !== 'log wavelength') continue
      const isRows = column.repeat === 1 && hdu.rows === length
      if (!isRows && !(column.repeat === length && hdu.rows > 0)) continue
      const values = isRows ? columnNumbers(source, hdu, column) : cellNumbers(source, hdu, column, 0)
      const answer = listedAxis(values, {
        name: `column ${column.name} of HDU ${hdu.index}`,
        unit: column.unit,
        role,
        keyword: `TUNIT${column.index + 1}`,
      })
      if ('refusal' in answer) return { refusal: { ...answer.refusal, hdu: hdu.index } }
      return {
        axis: answer.axis,
        label: { name: column.name, ucd: column.ucd, utype: column.utype },
        hdu: hdu.index,
        perRow: false,
      }
    }
  }
  return undefined
}
