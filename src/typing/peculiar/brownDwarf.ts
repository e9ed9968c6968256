import type { Look, Recognised } from './look.ts'

/**
 * Brown dwarfs of type L and T: the light rises to the red beyond that of any M dwarf, and the potassium doublet is as
 * wide as only in the densest cool atmospheres (giants have it narrow).
 */
export function brownDwarf(look: Look): Recognised | undefined {
  const red = look.mean(8230, 8270)
  const blue = look.mean(7540, 7580)
  if (red.used < 0.8 || blue.used < 0.8 || !(red.mean > 3 * red.error)) return undefined
  const limit = look.limit('brownRise')
  if (red.mean - limit * blue.mean < 3 * Math.hypot(red.error, limit * blue.error)) return undefined
  const rise = red.mean / Math.max(blue.mean, blue.error)
  const potassium = look.strength('KI7680')
  const isWide =
    potassium !== undefined && potassium.ew > look.limit('brownPotassium') && potassium.ew > 4 * potassium.error
  if (!isWide && rise < look.limit('brownSteep')) return undefined
  const text = `the light rises ${rise.toFixed(1)} times from 7560 to 8250 Å (M9 dwarfs ${limit})`
  return {
    peculiarity: look.peculiarity('brown dwarf', isWide ? `${text}, K I takes ${potassium.ew.toFixed(0)} Å` : text),
    isOutside: true,
  }
}
