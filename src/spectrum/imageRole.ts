import { plainName, planeRole } from './planeRole.ts'
import type { PlaneRole } from './planeRole.ts'

/** The part of an extension's name that stands before its role: 'B' of 'B_FLUX', '' of 'SCI'. */
export function namePrefix(name: string): string {
  const match = /^([A-Za-z0-9]{1,6})_(.+)$/.exec(name.trim())
  if (!match || /^(no|non|un)$/i.test(match[1]) || planeRole(match[1]) !== undefined) return ''
  return planeRole(match[2]) === undefined ? '' : match[1].toUpperCase()
}

/** What an image extension holds by its name; 'flux' for the names of arrays and for none. */
export function imageRole(name: string): PlaneRole | undefined {
  const plain = plainName(name)
  if (plain === '' || plain === 'compressed_image' || plain === 'primary' || /^(image|array|hdu|ext)\d*$/.test(plain))
    return 'flux'
  const prefix = namePrefix(name)
  return planeRole(prefix === '' ? name : name.slice(prefix.length + 1))
}
