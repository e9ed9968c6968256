import type { Column, Header } from '../fits/types.ts'
import { plainName, planeRole } from './planeRole.ts'
import type { PlaneRole } from './planeRole.ts'
import type { RoledColumn } from './columnRoles.ts'
import type { UncertaintyKind } from './types.ts'

/** The kind of uncertainty that a role means; undefined for roles that are none. */
export function uncertaintyKind(role: PlaneRole | undefined): UncertaintyKind | undefined {
  if (role === 'sigma' || role === 'systematic') return 'sigma'
  return role === 'variance' || role === 'inverse variance' || role === 'relative' ? role : undefined
}

const ORDER: readonly PlaneRole[] = ['sigma', 'inverse variance', 'variance', 'relative', 'systematic']

/** The uncertainty column that belongs to a flux column: one that carries its name before any other, statistical first. */
export function pickErrors(
  roled: readonly RoledColumn[],
  flux: Column,
): { readonly column: Column; readonly kind: UncertaintyKind } | undefined {
  const errors = roled.filter(
    ({ role, column }) => uncertaintyKind(role) !== undefined && column.repeat === flux.repeat,
  )
  const name = plainName(flux.name)
  const own = name === 'flux' ? [] : errors.filter(({ column }) => plainName(column.name).includes(name))
  const among = own.length > 0 ? own : errors
  for (const wanted of ORDER) {
    const found = among.find(({ role }) => role === wanted)
    const kind = uncertaintyKind(wanted)
    if (found && kind) return { column: found.column, kind }
  }
  return undefined
}

/** The column of flags and which of its values are bad: anything but 0, or 0 itself where its comment says 1 is good. */
export function flagsOf(
  columns: readonly Column[],
  header: Header,
): { readonly column: Column; readonly isBad: (value: number) => boolean } | undefined {
  // Survey masks of single exposures ('and', 'or') mark bright sky and the like, not bad samples: the variance does that.
  const column = columns.find(
    ({ name }) => planeRole(name) === 'mask' && !/and|or_?mask|bit/.test(plainName(name).replace('_mask', 'mask')),
  )
  if (!column) return undefined
  const comment = header.get(`TTYPE${column.index + 1}`)?.comment ?? ''
  const isReversed = /1\s*=\s*good|0\s*=\s*bad/i.test(comment)
  return { column, isBad: isReversed ? (value) => value === 0 : (value) => value !== 0 && Number.isFinite(value) }
}
