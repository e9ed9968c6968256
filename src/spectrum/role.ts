import type { HeaderFacts, Spectrum } from './types.ts'

const LAMP_FRAME = /\b(arcs?|comp|comparison|lamp|wave|wavecal|thar|arc_?lamp|calib_?lamp)\b/i
// Element names stand alone or in pairs: 'HE 1234', 'AR Lac' and 'CD-38 245' are stars.
const LAMP_OBJECT =
  /^\s*(arcs?|comp|comparison|lamp|wave|calibration lamp)(\s*$|[_ :\d])|^(cu|ne|hg|xe|ar|kr|he|cd|th|fe)$|(^|[^a-z])(th-?ar|he-?ar|cu-?ar|cu-?he-?ar|hg-?ar|hg-?ar-?ne|fe-?ar|he-?ne|ne-?ar|hg-?ne|hg-?cd|cd-?he|u-?ne|th-?ne|he-?ne-?ar|he-?ar-?ne|ar-?ne)([^a-z]|$)/i
const SKY = /^\s*(sky|night ?sky|blank ?sky|twilight|skyflat|background)\b|\bsky\b/i
const CALIBRATION =
  /\b(bias|zero|dark|flat|dflat|domeflat|skyflat|lampflat|sens|sensitivity|response|extinction|throughput)\b/i

/**
 * What a spectrum holds by the words of its header: 'lamp', 'sky', 'calibration', else 'star'. Words that only name
 * the kind of frame weigh before the object's name.
 */
export function spectrumRole(facts: HeaderFacts): Spectrum['role'] {
  const words = facts.frameWords ?? ''
  const object = facts.object ?? ''
  if (LAMP_FRAME.test(words) || LAMP_OBJECT.test(object)) return 'lamp'
  if (/\bsky\b/i.test(words) || SKY.test(object)) return 'sky'
  if (CALIBRATION.test(words) || CALIBRATION.test(object)) return 'calibration'
  return 'star'
}
