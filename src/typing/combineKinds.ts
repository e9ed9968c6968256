import type { Peculiarity, TypePosterior } from './types.ts'

/**
 * The common type of several spectra of one star with what is peculiar in any of them: an emission line may lie in one
 * arm only. Where most of the spectra say that this is no ordinary star, and which kind, the first of those stands for all,
 * since the common type would be of a star that it is not.
 *
 * @param common  type from the evidence of all spectra together
 * @param single  types of the spectra, the best first
 */
export function combineKinds(common: TypePosterior, single: readonly TypePosterior[]): TypePosterior {
  const outside = single.filter(({ state, peculiar }) => state === 'outside' && peculiar.length > 0)
  if (outside.length * 2 > single.length) return outside[0]
  const peculiar: Peculiarity[] = [...common.peculiar]
  for (const type of single) {
    if (type.state === 'outside') continue
    for (const one of type.peculiar) {
      // Metals are told from all spectra together, and better so.
      if (one.word !== 'metal-weak' && !peculiar.some(({ word }) => word === one.word)) peculiar.push(one)
    }
  }
  return peculiar.length === common.peculiar.length ? common : { ...common, peculiar }
}
