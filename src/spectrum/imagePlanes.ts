import { readImage } from '../fits/image.ts'
import type { Hdu } from '../fits/types.ts'
import type { Container } from './container.ts'
import type { FlagPlane, UncertaintyPlane } from './found.ts'
import { imageRole, namePrefix } from './imageRole.ts'
import type { PlaneRole } from './planeRole.ts'
import { uncertaintyKind } from './tablePlanes.ts'

/** The planes of the same shape that go with an image of fluxes, read by row on demand. */
export interface ImagePlanes {
  uncertainty(row: number, samples: number, length: number): UncertaintyPlane | undefined
  flags(row: number, samples: number, length: number): FlagPlane | undefined
  sky(row: number, samples: number, length: number): Float64Array | undefined
}

const ERRORS: readonly PlaneRole[] = ['sigma', 'inverse variance', 'variance', 'relative']

/** The uncertainty, flags and sky extensions that belong to the flux of an image HDU, by name and shape. */
export function imagePlanes({ file, source }: Container, owner: Hdu): ImagePlanes {
  const prefix = namePrefix(owner.name)
  const same = file.hdus.filter(
    (hdu) => hdu !== owner && isSameShape(hdu, owner) && belongs(file.hdus, hdu, owner, prefix),
  )
  const pick = (role: PlaneRole): Hdu | undefined => same.find((hdu) => imageRole(hdu.name) === role && hdu.name !== '')
  const errors = ERRORS.map(pick).find((hdu) => hdu !== undefined)
  const kind = errors && uncertaintyKind(imageRole(errors.name))
  const mask = pick('mask')
  const sky = imageRole(owner.name) === 'sky' ? undefined : pick('sky')
  const read = (hdu: Hdu, row: number, samples: number, length: number): Float64Array =>
    readImage(source, hdu, { start: row * samples, count: length })
  const isAnd = mask && /(^|_)(and|or)(_|$)/i.test(mask.name)
  return {
    uncertainty: (row, samples, length) => errors && kind && { values: read(errors, row, samples, length), kind },
    flags: (row, samples, length) =>
      mask && !isAnd
        ? {
            values: read(mask, row, samples, length),
            isBad: (value) => value !== 0 && Number.isFinite(value),
            words: `flags in extension ${mask.name}`,
          }
        : undefined,
    sky: (row, samples, length) => sky && read(sky, row, samples, length),
  }
}

function isSameShape(hdu: Hdu, owner: Hdu): boolean {
  if (hdu.kind !== 'image' && hdu.kind !== 'compressed image') return false
  const a = hdu.dimensions.filter((n) => n > 1)
  const b = owner.dimensions.filter((n) => n > 1)
  return a.length === b.length && a.every((n, i) => n === b[i])
}

/** True when a plane goes with the flux: the same prefix and version, or a prefix that no other flux bears. */
function belongs(hdus: readonly Hdu[], hdu: Hdu, owner: Hdu, prefix: string): boolean {
  const own = namePrefix(hdu.name)
  const fluxes = hdus.filter((other) => other.name !== '' && imageRole(other.name) === 'flux')
  const versioned = fluxes.filter((other) => other.name === owner.name).length > 1
  if (versioned && hdu.version !== owner.version) return false
  if (own === prefix) return true
  return prefix === '' && !fluxes.some((other) => namePrefix(other.name) === own)
}
