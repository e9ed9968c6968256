import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { measureStar } from '../../../src/pipeline/analyseSpectrum.ts'
import { withinRange } from '../../../src/spectrum/withinRange.ts'
import { CALIBRATION } from '../../../src/tables/calibration.ts'
import { KIND_CRITERIA } from '../../../src/tables/criteria.ts'
import { recogniseKinds, withKinds } from '../../../src/typing/peculiar/recogniseKinds.ts'
import type { TypePosterior } from '../../../src/typing/types.ts'
import { typeSpectrum } from '../../../src/typing/typeSpectrum.ts'
import { hasShared, NEEDS_SHARED, sharedPath } from '../../support/shared.ts'
import { readStar, sharedStars } from '../../support/typing/sharedStars.ts'

function typeOf(file: string): TypePosterior {
  const star = measureStar(withinRange(readStar(file), 3000, 11000), { maximumVelocity: 1500 })
  return withKinds(typeSpectrum(star.typing, CALIBRATION), recogniseKinds(star, KIND_CRITERIA, CALIBRATION))
}

const NEVER_TYPED = ['white dwarf', 'hot subdwarf', 'brown dwarf', 'galaxy']

describe.skipIf(!hasShared)(`recogniseKinds on real spectra (${NEEDS_SHARED})`, () => {
  it('says the right word of at least 9 in 10 objects that are no ordinary stars, and types none of the four kinds', () => {
    // kinds as published: CALSPEC, Kinney et al. 1996, Kowalski et al. 2013, Boyd 2018
    const rows = readFileSync(sharedPath('stars/others.tsv'), 'utf8').trimEnd().split('\n').slice(1)
    const wrong: string[] = []
    for (const row of rows) {
      const [file, , kind] = row.split('\t')
      const type = typeOf(file)
      if (!type.peculiar.some(({ word }) => word === kind)) wrong.push(`${file} is ${kind}`)
      if (NEVER_TYPED.includes(kind)) expect(['outside', 'none'], file).toContain(type.state)
    }
    expect(wrong.length, wrong.join(', ')).toBeLessThanOrEqual(0.1 * rows.length)
  })

  it('calls at most 1 in 50 ordinary stars a white dwarf, subdwarf, brown dwarf, galaxy, nebula, carbon or composite star', () => {
    // every second star of the atlas and of the type averages; emission is real in some supergiants and M dwarfs
    const stars = sharedStars(['atlas', 'pickles']).filter((_, i) => i % 2 === 0)
    const wrong = stars.flatMap(({ file, spectralType }) => {
      const star = measureStar(withinRange(readStar(file), 3000, 11000), { maximumVelocity: 1500 })
      const words = recogniseKinds(star, KIND_CRITERIA, CALIBRATION).map(({ peculiarity }) => peculiarity.word)
      return words.filter((word) => word !== 'emission').map((word) => `${file} ${spectralType}: ${word}`)
    })
    expect(wrong.length, wrong.join(', ')).toBeLessThanOrEqual(stars.length / 50)
  })
})
