import type { FrameKind } from './types.ts'

/** A word, or words in a row, that tells a kind of frame. */
export interface FrameWord {
  readonly kind: FrameKind
  /** Tested against text in lower case whose separators have become single spaces. */
  readonly pattern: RegExp
}

/**
 * What observatories write into the keywords on the kind of a frame, most telling first. Common practice of the
 * archives, no source; 'object', 'expose' and 'light' are absent on purpose: they are written for lamps too.
 */
export const KIND_WORDS: readonly FrameWord[] = [
  { kind: 'bias', pattern: /\b(?:bias|zero|biases|zeros|offset frame|superbias)\b/ },
  {
    kind: 'skyflat',
    pattern: /\b(?:sky ?flats?|flat sky|twilight(?: flats?)?|twiflat|flat twilight|dusk|dawn flats?)\b/,
  },
  {
    kind: 'flat',
    pattern:
      /\b(?:flats?|flat ?field(?:s|ing)?|lamp ?flats?|flat ?lamp|dome ?flats?|d ?flats?|dome|i ?flats?|p ?flats?|internal flat|milky flat|slit ?flats?|quartz|halogen|orderdef|whitelamp|tungsten)\b/,
  },
  { kind: 'dark', pattern: /\b(?:darks?|dark ?frames?|dark current)\b/ },
  {
    kind: 'arc',
    pattern:
      /\b(?:arcs?|arc ?lamps?|wave|wavecal|wave ?lamp|lamp wave|comp|comps|comparison|comparison (?:lamp|arc|spectrum)|calib ?lamp|line ?lamp|th ?ar|thorium|cu ?ar|fe ?ar|cu ?ne|hene(?:ar)?|he ?ne ?ar|he ?ar|ne ?ar|hgcd|hg ?ar|hg ?ne|fp|fabry perot|etalon)\b/,
  },
  { kind: 'focus', pattern: /\b(?:focus|hartmann|knife ?edge|focus ?run|through ?focus)\b/ },
  {
    kind: 'acquisition',
    pattern:
      /\b(?:acq|acquisition|acquire|slit ?view(?:er)?|slit ?image|through slit|field image|guide|finder|centering|peak ?up)\b/,
  },
  {
    kind: 'standard',
    pattern:
      /\b(?:std|standards?|flux ?std|spectrophotometric|std flux|std telluric|telluric|flux ?standard|telluric ?standard|calibrator)\b/,
  },
  { kind: 'sky', pattern: /\b(?:sky|blank ?sky|sky ?offset|background)\b/ },
]

/** Words that say only that the shutter was open: science, unless the object or the lamp tells otherwise. */
export const OPEN_WORDS = /\b(?:object|science|sci|target|expose|exposure|light|star|astro|obj)\b/

/** Names an observer gives to calibrations in the object's place; tested like the words, against the whole name. */
export const OBJECT_NAMES: readonly FrameWord[] = [
  { kind: 'bias', pattern: /^(?:bias|zero)\b/ },
  { kind: 'dark', pattern: /^darks?(?: ?\d+ ?s?(?:ec)?)?(?: \d+)*$/ },
  { kind: 'skyflat', pattern: /^(?:sky ?flat|twi(?:light)? ?(?:flat)?|twilight|flat sky|dusk|dawn)s?\b(?: \w+)*$/ },
  {
    kind: 'flat',
    pattern:
      /^(?:(?:lamp|dome|d|i|p|slit|quartz|halogen|internal|blue|red|sup|super)? ?flats?(?:field| field| lamp)?|quartz|halogen|tungsten|dome)\b/,
  },
  {
    kind: 'arc',
    pattern:
      /^(?:arcs?(?: ?lamp)?\b|comp(?:arison)?\b|wave\b|calib?lamp\b|(?:(?:th|cu|fe|he|ne|ar|hg|cd|xe|kr|zn|na) ?){2,}(?:arc|lamp|comp)?\b|(?:th|cu|fe|he|ne|ar|hg|cd|xe|kr|zn) (?:arc|lamp)\b|(?:neon|argon|helium|mercury|xenon|krypton|thorium)\b)/,
  },
  { kind: 'focus', pattern: /^(?:focus|hartmann)\b/ },
  { kind: 'acquisition', pattern: /^(?:acq|acquisition|slit ?image|field)\b/ },
  { kind: 'sky', pattern: /^(?:sky|blank ?sky|blank)\b/ },
]

/** Lamps with a continuous spectrum; any other lamp that is on is taken for a line lamp. */
export const FLAT_LAMPS =
  /\b(?:w|tungsten|quartz|halogen|qth|continuum|flat|incandescent|deuterium|d2|blue|red|super? ?blue|led|white|dome|domelamp)\b/

/** Lamps of spectral lines. */
export const LINE_LAMPS =
  /\b(?:(?:th|thar|cu|cuar|fe|fear|he|hear|ne|near|ar|hg|hgar|hg a|hgcd|hg cd|cd|xe|kr|zn|na|henear|hene)|neon|argon|helium|mercury|cadmium|xenon|krypton|zinc|thorium|penray|arc|line|laser|dim neon|spare ar)\b/

/** Written where no lamp burns. */
export const NO_LAMP = /^(?:none|off|no|n a|na|out|f|false|0|unknown|closed|)$/

/** Text in lower case, with '_', '-', ',', ':', ';', '/', '+', '#', '(', ')' and runs of blanks as one blank, digits set apart from a leading word. */
export function plainWords(text: string): string {
  return text
    .replace(/([a-z])([A-Z][a-z])/g, '$1 $2')
    .toLowerCase()
    .replace(/[^a-z0-9.*]+/g, ' ')
    .replace(/\b(arc|flat|bias|zero|dark|dflat|domeflat|skyflat|comp|focus|acq)(\d+)\b/g, '$1 $2')
    .trim()
}
