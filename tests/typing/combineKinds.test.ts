import { describe, expect, it } from 'vitest'
import { combineKinds } from '../../src/typing/combineKinds.ts'
import type { PeculiarWord, TypePosterior } from '../../src/typing/types.ts'

const type = (state: TypePosterior['state'], ...words: PeculiarWord[]): TypePosterior => ({
  state,
  peculiar: words.map((word) => ({ word, text: `${word} in this test`, source: 'made for this test' })),
  evidence: [],
  ratios: [],
  featuresUsed: 0,
})
const words = ({ peculiar }: TypePosterior): PeculiarWord[] => peculiar.map(({ word }) => word)

describe('combineKinds', () => {
  it('carries an emission line of one arm into the common type, once', () => {
    const common = combineKinds(type('typed'), [type('typed'), type('wide', 'emission'), type('typed', 'emission')])
    expect([common.state, words(common)]).toEqual(['typed', ['emission']])
  })
  it('lets the kind that most spectra tell stand for all, and not that of a few', () => {
    expect(
      combineKinds(type('typed'), [type('outside', 'white dwarf'), type('outside', 'white dwarf'), type('typed')])
        .state,
    ).toBe('outside')
    expect(words(combineKinds(type('typed'), [type('outside', 'galaxy'), type('typed')]))).toEqual([])
  })
  it('leaves weak metals to the common type', () => {
    const common = type('typed')
    expect(combineKinds(common, [type('typed', 'metal-weak')])).toBe(common)
  })
})
