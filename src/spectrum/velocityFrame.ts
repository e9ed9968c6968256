import { cardNumber, cardText, cardTruth } from './cards.ts'
import type { Headers } from './cards.ts'
import { factCards, factNumber } from './factCards.ts'
import type { KeywordTable } from '../tables/types.ts'
import type { Note } from '../findings/types.ts'
import type { VelocityFrame } from './types.ts'

/** The frame of the wavelengths, the velocity [km/s] taken out if the header gives it, and how it was found. */
export interface FrameAnswer {
  readonly frame: VelocityFrame
  readonly applied?: number
  readonly notes: readonly Note[]
}

const FRAMES: readonly (readonly [RegExp, VelocityFrame])[] = [
  [/^TOPO/i, 'topocentric'],
  [/^GEO/i, 'geocentric'],
  [/^BARY/i, 'barycentric'],
  [/^HELIO/i, 'heliocentric'],
  [/^SOURCE|^REST/i, 'star'],
]
/** Pipelines whose merged 1-D spectra are in the barycentric frame by their documentation when they give this keyword. */
const BARYCENTRIC_PIPELINE = 'ESO DRS BERV'

/**
 * In which frame the wavelengths are: by SPECSYS, by flags that a heliocentric or barycentric correction was made, by
 * the cards a Doppler correction leaves, or by a pipeline's custom; 'unknown' when nothing says so.
 */
export function velocityFrame(headers: Headers, keywords: KeywordTable): FrameAnswer {
  const unused: Note[] = []
  const velocity = factNumber(
    headers,
    keywords,
    { fact: 'velocityApplied', range: [-100, 100], words: 'velocity' },
    unused,
  )
  const answer = (frame: VelocityFrame, where: string): FrameAnswer => ({
    frame,
    ...(velocity && (frame === 'barycentric' || frame === 'heliocentric') ? { applied: velocity.value } : {}),
    notes: frame === 'topocentric' ? [] : [{ code: 'velocity-frame', text: `wavelengths are ${frame} by ${where}` }],
  })
  for (const { card } of factCards(headers, keywords, 'velocityFrame')) {
    const found = FRAMES.find(([pattern]) => typeof card.value === 'string' && pattern.test(card.value))
    if (found) return answer(found[1], `${card.keyword} = ${String(card.value)}`)
  }
  for (const [fact, frame] of [
    ['barycentricFlag', 'barycentric'],
    ['heliocentricFlag', 'heliocentric'],
  ] as const) {
    for (const { card } of factCards(headers, keywords, fact)) {
      const isDone =
        cardTruth(headers, card.keyword) ?? /^(done|applied|perform|complete|yes)/i.test(String(card.value))
      if (isDone) return answer(frame, `${card.keyword} = ${String(card.value)}`)
    }
  }
  const applied = cardNumber(headers, 'BSS_VHEL')
  if (applied !== undefined && applied !== 0)
    return answer('heliocentric', `BSS_VHEL = ${applied}, a velocity taken out`)
  if (cardText(headers, 'DOPCOR01') !== undefined) {
    const why = `DOPCOR01 = ${cardText(headers, 'DOPCOR01')}`
    return answer(velocity ? 'heliocentric' : 'star', why)
  }
  if (headers.some((header) => header.get(BARYCENTRIC_PIPELINE)))
    return answer('barycentric', `${BARYCENTRIC_PIPELINE}, by the custom of its pipeline`)
  return { frame: 'unknown', notes: [] }
}
