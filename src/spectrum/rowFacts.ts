import type { Column, Hdu } from '../fits/types.ts'
import { cellNumbers, cellText } from './columnCells.ts'
import { isObjectName } from './columnRoles.ts'
import type { Container } from './container.ts'
import { plainName } from './planeRole.ts'
import type { HeaderFacts, Spectrum } from './types.ts'

/** What a table says of one of its rows, or of one fibre: whose spectrum it is. */
export interface RowFacts {
  readonly facts: Pick<HeaderFacts, 'object' | 'ra' | 'dec'>
  readonly role?: Spectrum['role']
}

const RA = /^(ra|ra_deg|raj2000|alpha|target_ra|plug_ra|fiber_ra|ra_targ|ra_obj|mean_ra)$/
const DEC = /^(dec|dec_deg|dej2000|decj2000|delta|target_dec|plug_dec|fiber_dec|dec_targ|dec_obj|mean_dec)$/
const TYPE = /^(type|objtype|obj_type|fibtype|fib_type|fibre_type|fiber_type|targtype|targ_type)$/

/** The object, direction and kind that a table row states; empty where it has no such columns. */
export function rowFacts({ source }: Container, table: Hdu, row: number): RowFacts {
  const find = (pattern: RegExp): Column | undefined =>
    table.columns.find((column) => column.repeat !== 0 && pattern.test(plainName(column.name)))
  const object = table.columns.find(isObjectName)
  const name = object && cellText(source, table, object, row)
  const ra = degrees(source, table, find(RA), row)
  const dec = degrees(source, table, find(DEC), row)
  const isPlace =
    ra !== undefined && dec !== undefined && ra >= 0 && ra <= 360 && Math.abs(dec) <= 90 && (ra !== 0 || dec !== 0)
  const kind = find(TYPE)
  const word = kind?.letter === 'A' ? (cellText(source, table, kind, row) ?? '') : ''
  const role = /^(s|sky)\b|_sky$/i.test(word)
    ? ('sky' as const)
    : /^(arc|comp|lamp)/i.test(word)
      ? ('lamp' as const)
      : undefined
  return {
    facts: { ...(name === undefined ? {} : { object: name }), ...(isPlace ? { ra, dec } : {}) },
    ...(role ? { role } : {}),
  }
}

function degrees(source: Container['source'], table: Hdu, column: Column | undefined, row: number): number | undefined {
  if (!column || column.letter === 'A' || column.repeat !== 1) return undefined
  const value = cellNumbers(source, table, column, row)[0]
  if (!Number.isFinite(value)) return undefined
  return /^rad/i.test(column.unit) ? (value * 180) / Math.PI : value
}

/** The table that lists the fibres of an image, one a row: as many rows, and columns of names, kinds or directions. */
export function fibreTable({ file }: Container, owner: Hdu, rows: number): Hdu | undefined {
  return file.hdus.find((hdu) => {
    if (hdu === owner || hdu.rows !== rows || rows < 2) return false
    const names = hdu.columns.map((column) => plainName(column.name))
    const isListed = hdu.columns.some(isObjectName) || names.some((name) => TYPE.test(name))
    return isListed || (names.some((name) => RA.test(name)) && names.some((name) => DEC.test(name)))
  })
}
