import { cardText, cardTruth, remarks } from './cards.ts'
import type { Headers } from './cards.ts'
import type { Medium, MediumHow } from './types.ts'
import type { Note } from '../findings/types.ts'

/** What the column or extension that holds the wavelengths says of itself. */
export interface WavelengthLabel {
  readonly name: string
  readonly ucd: string
  readonly utype: string
}

/** A medium, and how it is known. */
export interface MediumAnswer {
  readonly medium: Medium
  readonly how: MediumHow
  readonly notes: readonly Note[]
}

/** Telescopes above the air; their wavelengths are given in vacuum. */
const IN_SPACE = /^(hst|hubble|iue|fuse|galex|euve|jwst|spitzer|kepler|gaia|iras|iso|hut|copernicus|swift|astro)\b/i
/** Surveys and pipelines that give vacuum or air whatever the header says, by their documentation. */
const CUSTOMS: readonly (readonly [string, RegExp, Medium, string])[] = [
  ['TELESCOP', /sdss|lamost|guoshoujing/i, 'vacuum', 'the survey gives vacuum wavelengths'],
  ['INSTRUME', /desi|boss|apogee/i, 'vacuum', 'the survey gives vacuum wavelengths'],
  ['INSTRUME', /crires/i, 'vacuum', 'the instrument gives vacuum wavelengths by custom'],
  [
    'INSTRUME',
    /harps|uves|feros|hermes|fies|coralie|espadons|narval|sophie|elodie/i,
    'air',
    'the instrument gives air wavelengths by custom',
  ],
]
/** Cards by which files of reduction software are known that gives vacuum wavelengths unless told otherwise. */
const PRODUCERS: readonly (readonly [string, RegExp])[] = [
  ['UNITS', /"wave"\s*:\s*"/],
  ['BINSPEC', /^\d+$/],
  ['PYP_SPEC', /./],
]
/** Published libraries by a reference in their headers. */
const LIBRARIES: readonly (readonly [RegExp, Medium, string])[] = [
  [/1998PASP\.\.110\.\.863P|1998, ?PASP,? ?110, ?863/, 'air', 'Pickles 1998 gives wavelengths in air'],
]

/**
 * The medium of wavelengths and how it is known: declared by the axis type, by a column's UCD or name, by a keyword
 * (VACUUM, AIRORVAC ...) or in the header's remarks; else guessed from the telescope, the survey, the range, and at
 * last from the custom of ground-based optical spectra, air. Every guess carries a note.
 *
 * @param declared  what the axis itself declares (a Paper III code), with its card
 * @param range     first and last wavelength [Å] of all spectra stored together
 * @param unit      of the flux, as the file writes it
 */
export function decideMedium(
  headers: Headers,
  declared: { readonly medium?: Medium; readonly from?: string },
  label: WavelengthLabel | undefined,
  { range, unit }: { readonly range: readonly [number, number]; readonly unit: string },
): MediumAnswer {
  const stated = statedMedium(headers, declared, label)
  if (stated) return stated
  const guess = (medium: Medium, why: string): MediumAnswer => ({
    medium,
    how: 'guessed',
    notes: [
      { code: 'medium-guessed', text: `the header does not say air or vacuum; taken for ${medium} because ${why}` },
    ],
  })
  const text = `${remarks(headers)}\n${cardText(headers, 'REFERENC') ?? ''}\n${cardText(headers, 'SOURCE') ?? ''}`
  const library = LIBRARIES.find(([pattern]) => pattern.test(text))
  if (library) return guess(library[1], library[2])
  const telescope = cardText(headers, 'TELESCOP') ?? ''
  if (IN_SPACE.test(telescope)) return guess('vacuum', `${telescope} observes above the air`)
  const custom = CUSTOMS.find(([keyword, pattern]) => pattern.test(cardText(headers, keyword) ?? ''))
  if (custom) return guess(custom[2], `${custom[3]} (${custom[0]} = ${cardText(headers, custom[0])})`)
  if (/^(flam|fnu|photlam|photnu|stmag|abmag)$/i.test(unit.trim()))
    return guess('vacuum', `the flux unit ${unit} is a custom of space telescopes, which give vacuum wavelengths`)
  const mark = PRODUCERS.find(([keyword, pattern]) => pattern.test(cardText(headers, keyword) ?? ''))
  if (mark)
    return guess(
      'vacuum',
      `the software that leaves ${mark[0]} in the header gives vacuum wavelengths by its documentation`,
    )
  const low = range[0]
  if (low < 2000) return guess('vacuum', `the range begins below 2000 Å, where spectra are given in vacuum`)
  if (low > 10000) return guess('vacuum', `the range lies in the infrared, where spectra are given in vacuum by custom`)
  return guess('air', 'ground-based optical spectra are given in air by custom')
}

function statedMedium(
  headers: Headers,
  declared: { readonly medium?: Medium; readonly from?: string },
  label: WavelengthLabel | undefined,
): MediumAnswer | undefined {
  const say = (medium: Medium, where: string): MediumAnswer => ({
    medium,
    how: 'declared',
    notes: [{ code: 'medium-declared', text: `the file says that its wavelengths are in ${medium} (${where})` }],
  })
  if (label) {
    const name = label.name.toLowerCase()
    if (/vac/.test(name)) return say('vacuum', `the name of the wavelengths, ${label.name}`)
    if (/(^|[^a-z])air/.test(name) || /^awav/.test(name))
      return say('air', `the name of the wavelengths, ${label.name}`)
  }
  const flag = cardTruth(headers, 'VACUUM') ?? cardTruth(headers, 'VACWAVE')
  if (flag !== undefined)
    return say(flag ? 'vacuum' : 'air', `VACUUM = ${cardText(headers, 'VACUUM') ?? cardText(headers, 'VACWAVE')}`)
  for (const keyword of ['AIRORVAC', 'AIRVAC', 'WAVEMED', 'MEDIUM', 'VACORAIR', 'WAVETYPE', 'METADATA']) {
    const text = cardText(headers, keyword)
    if (text === undefined) continue
    const word = keyword === 'METADATA' ? (/"airvac"\s*:\s*"(\w+)"/i.exec(text)?.[1] ?? '') : text
    if (/^vac/i.test(word)) return say('vacuum', `${keyword} = ${word}`)
    if (/^air/i.test(word)) return say('air', `${keyword} = ${word}`)
  }
  if (declared.medium) return say(declared.medium, declared.from ?? 'the axis')
  if (label?.ucd) {
    if (/em\.wl/i.test(label.ucd) && /obs\.atmos/i.test(label.ucd)) return say('air', `the UCD ${label.ucd}`)
    if (/em\.(wl|freq|wavenumber|energy)/i.test(label.ucd)) return say('vacuum', `the UCD ${label.ucd}`)
  }
  const remark = /^.*\bwave(?:length)?s?\b[^.\n]*\b(vacuum|air)\b.*$/im.exec(remarks(headers))
  if (remark && !/air\s*mass/i.test(remark[0]))
    return say(remark[1].toLowerCase() as Medium, `the remark '${remark[0].trim()}'`)
  return undefined
}
