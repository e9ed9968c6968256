/** What a column, an image extension or an image row holds, by its name. */
export type PlaneRole =
  | 'wavelength'
  | 'log wavelength'
  | 'flux'
  | 'normalised'
  | 'sigma'
  | 'systematic'
  | 'variance'
  | 'inverse variance'
  | 'relative'
  | 'mask'
  | 'weight'
  | 'sky'
  | 'curve'
  | 'other'

/** First match wins, so errors of a flux stand before the flux. Names are in lower case, other signs as '_'. */
const PATTERNS: readonly (readonly [PlaneRole, RegExp])[] = [
  ['other', /no_?sky|nosky|fwhm|resol|wdisp|dispersion|lsf|exptime|totexp|npix|ndata|xpos|ypos|trace|ccf|profile/],
  ['curve', /throughput|transmi|sensitivity|sensfunc|response|extinction|contrast|efficien|opacity|quantum|area/],
  ['log wavelength', /^(log|lg|ln)_?(10)?_?(lam|lambda|wave|wavelength|wl|wavel)s?(_|$)|^loglam/],
  ['relative', /rel(ative)?_(err|error|sigma|unc|noise)|fractional_(err|sigma|unc)/],
  ['inverse variance', /ivar|inv(erse)?_?var|^inverse$|^err_?ivar/],
  ['variance', /(^|_)var(iance)?(_|$)|variance|varflux|fluxvar/],
  ['systematic', /sys(tematic)?_?err|syserror|sys_unc/],
  [
    'sigma',
    /(^|_)(e|err|errs|error|errors|sig|sigma|sigmas|noise|unc|uncert|uncertainty|std|stdev|stddev|rms)(_|$)|stat_?err|flux_?err|err_?flux|dflux|eflux|sigflux|uncertaint|error/,
  ],
  ['mask', /mask|(^|_)dq(_|$)|qual|flag|badpix|(^|_)bpm(_|$)|dataqual|status/],
  ['weight', /(^|_)(weight|weights|wht|snr|s_n|sn)(_|$)/],
  [
    'wavelength',
    /^(obs_?|rest_?|vac_?|air_?|bary_?|helio_?|opt_|box_|std_|sci_|[a-z]_|calib_|arm_)?(wave|waves|wavelength|wavelengths|wavelen|wavel|waveln|wlen|wl|lambda|lambdas|lam|awav|spectral_axis|spectral_coordinate|angstrom|angstroms|microns?)(_?(vac|vacuum|air|obs|bary|helio|nm|um|a|aa|ang|angstroms?|microns?|soln|sol|start|\d+))*$/,
  ],
  ['sky', /(^|_)(sky|skies|bkg|bkgd|back|background|bgd)(_|$)|sky_?(flux|spec)|skyflux/],
  ['normalised', /normali[sz]|(^|_)norm(_|$)|rectified|flux_?norm|continuum_?normal|contsub|continuum_sub/],
  [
    'other',
    /contin|model|fit(_|$)|template|tell?uric|scatter|cross_?talk|blaze|flat|gross|gcounts|raw|noss|calib_?vec|epsilon|residual|corr/,
  ],
  [
    'flux',
    /flux|flam|fnu|f_lambda|f_nu|(^|_)(spec|spect|spectrum|spectra|counts?|cts|intensity|int|sci|signal|net|abnet|ampl|amplitude|adu|electrons|data|surface_brightness|irradiance|f)(_|\d|$)/,
  ],
]

/** The role that a name announces ('FLUX_ERR', 'lambda_vac', 'B_IVAR', 'and_mask'); undefined for a name that says nothing. */
export function planeRole(name: string): PlaneRole | undefined {
  const plain = plainName(name)
  return plain === '' ? undefined : PATTERNS.find(([, pattern]) => pattern.test(plain))?.[0]
}

/** A name in lower case with every sign that is neither letter nor digit as one '_', none at the ends. */
export function plainName(name: string): string {
  return name
    .trim()
    .replace(/([a-z])([A-Z])/g, '$1_$2')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '_')
    .replace(/^_+|_+$/g, '')
}

/** How good a name is for the flux of the object, 0 the best: calibrated before net counts. */
export function fluxRank(name: string): number {
  const plain = plainName(name)
  if (/flux|flam|fnu|f_lambda/.test(plain)) return 0
  if (/abnet/.test(plain)) return 1
  if (/^net|net$/.test(plain)) return 2
  return 1.5
}
