import { plainName, planeRole } from './planeRole.ts'
import type { PlaneRole } from './planeRole.ts'
import type { Column } from '../fits/types.ts'
import { isFluxUnit } from './fluxUnit.ts'
import { spectralUnit } from './unit.ts'

/** A column with the role that its utype, UCD, name or unit gives it. */
export interface RoledColumn {
  readonly column: Column
  readonly role: PlaneRole | undefined
}

const UTYPES: readonly (readonly [RegExp, PlaneRole])[] = [
  [/SpectralAxis\.(Value|Coord)$/i, 'wavelength'],
  [/FluxAxis\.Value$/i, 'flux'],
  [/FluxAxis\.Accuracy\.StatError/i, 'sigma'],
  [/FluxAxis\.Accuracy\.SysError/i, 'systematic'],
  [/Accuracy\.QualityStatus/i, 'mask'],
  [/BackgroundModel\.Value$/i, 'sky'],
]
const UCDS: readonly (readonly [RegExp, PlaneRole])[] = [
  [/^stat\.error(;.*)?phot\.flux/i, 'sigma'],
  [/^(em\.(wl|freq|wavenumber|energy))/i, 'wavelength'],
  [/^(phot\.(flux|count|fluence)|arith\.ratio;phot\.flux)/i, 'flux'],
  [/^meta\.code\.qual/i, 'mask'],
]
const NUMERIC = /^[BIJKED]$/

/** True for a column of real numbers. */
export function isNumeric(column: Column): boolean {
  return NUMERIC.test(column.letter) && column.repeat !== 0
}

/** The columns of numbers with their roles; names decide before UCDs, since one UCD often stands for several columns. */
export function columnRoles(columns: readonly Column[]): readonly RoledColumn[] {
  return columns.filter(isNumeric).map((column) => ({ column, role: roleOf(column) }))
}

function roleOf(column: Column): PlaneRole | undefined {
  const byUtype = UTYPES.find(([pattern]) => pattern.test(column.utype))?.[1]
  if (byUtype) return byUtype
  const name = plainName(column.name)
  const unit = spectralUnit(column.unit)
  if (/^(freq|frequency|nu|energy|energies|wavenumber|wavenumbers|wavenum|wn|k)$/.test(name))
    return unit ? 'wavelength' : undefined
  const byName = planeRole(column.name)
  if (byName) return byName
  const byUcd = UCDS.find(([pattern]) => pattern.test(column.ucd))?.[1]
  if (byUcd) return byUcd
  if (isFluxUnit(column.unit)) return 'flux'
  return undefined
}

/** True for a column that counts the good samples of its row. */
export function isCount(column: Column): boolean {
  return (
    column.repeat === 1 &&
    /^(npts|npoints|ndata|nelem|nelems|npix|n_pix|nsamples|nwave|npt)$/.test(plainName(column.name))
  )
}

/** True for a column that gives the wavelength step of its row. */
export function isStep(column: Column): boolean {
  return (
    column.repeat === 1 &&
    /^(delta_?w(ave)?|delta_?lam(bda)?|d_?wave|d_?lambda|dw|dlam|w_?step|wave_?step|step|dispersion|cdelt_?1?)$/.test(
      plainName(column.name),
    )
  )
}

/** True for a column that names the object of its row. */
export function isObjectName(column: Column): boolean {
  return (
    (column.letter === 'A' || /^target_?id$/i.test(column.name)) &&
    /^(name|object|obj|objname|target|targname|star|source|id|obj_?id|target_?id)$/.test(plainName(column.name))
  )
}

/** True for a column that names the order, arm, segment or aperture of its row. */
export function isPartName(column: Column): boolean {
  return (
    /^(arm|segment|order|orders|band|camera|ccd|channel|sporder|echelle_?order|aperture)$/.test(
      plainName(column.name),
    ) &&
    (column.letter === 'A' || column.repeat === 1)
  )
}
