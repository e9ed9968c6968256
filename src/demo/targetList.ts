import { DEMO_STANDARDS, DEMO_TARGETS } from '../tables/demoNight.ts'

const COLUMNS = 'object,ra,dec,mag,pm_ra_mas,pm_dec_mas,epoch,expected_type,wanted_snr,priority,note'

/** The observer's target list of the demo night as CSV, stars in the order of the night, standards last. */
export function targetList(): string {
  const rows = [...DEMO_TARGETS, ...DEMO_STANDARDS].map((star) =>
    [
      star.name,
      star.ra.toFixed(4),
      star.dec.toFixed(4),
      star.mag.toFixed(1),
      star.pmRa?.toFixed(1) ?? '',
      star.pmDec?.toFixed(1) ?? '',
      '2000',
      star.expected,
      String(star.wantedSnr),
      String(star.priority),
      star.note ?? '',
    ].join(','),
  )
  return [COLUMNS, ...rows, ''].join('\n')
}
