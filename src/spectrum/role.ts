import type { HeaderFacts, Spectrum } from './types.ts'

const LAMP_FRAME = /\b(arcs?|comp|comparison|lamp|wave|wavecal|thar|arc_?lamp|calib_?lamp)\b/i
const LAMP_OBJECT =
  /^\s*(arc|arcs|comp|comparison|lamp|wave|calibration lamp)\b|^(arc|comp)[_ :\d]|\b(th-?ar|he-?ar|cu-?ar|cu-?he-?ar|hg-?ar(-?ne)?|fe-?ar|he-?ne|ne-?ar|hg-?ne|hg-?cd|cd-?he|u-?ne|th-?ne)\b|^(th-?ar|he-?ar|cu-?ar|cu-?he-?ar|hg-?ar|fe-?ar|hg-?ar-?ne|cu|ne|hg|xe|ar|kr|he|cd|cuhear_\w+)\d*\w*$|^thar/i
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
