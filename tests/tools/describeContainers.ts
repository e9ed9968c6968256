/**
 * Prints one JSON line a spectrum (or an error a file), as the `describe` command does, for the files of a manifest.
 *   npx tsx tests/tools/describeContainers.ts MANIFEST [FOLDER] > out.jsonl
 * Paths of the manifest are taken below FOLDER, by default the manifest's own.
 */
import { readFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { FormatError } from '../../src/errors.ts'
import { inflateSource } from '../../src/fits/inflate.ts'
import { openFits } from '../../src/fits/open.ts'
import { memorySource } from '../../src/fits/source.ts'
import { describeSpectrum } from '../../src/spectrum/describe.ts'
import { readSpectra } from '../../src/spectrum/readSpectra.ts'
import { KEYWORDS } from '../../src/tables/keywords.ts'

const [manifest, folder = dirname(manifest)] = process.argv.slice(2)
const paths = new Set(
  readFileSync(manifest, 'utf8')
    .split('\n')
    .slice(1)
    .map((line) => line.split('\t')[0])
    .filter((path) => path !== ''),
)
for (const path of paths) {
  try {
    const source = inflateSource(memorySource(readFileSync(join(folder, path))))
    const result = readSpectra(openFits(source), source, { keywords: KEYWORDS, fileName: path })
    for (const spectrum of result.spectra) console.log(JSON.stringify(describeSpectrum(path, spectrum)))
    if (result.error) {
      const { hdu, keyword, byte } = result.error.where
      console.log(
        JSON.stringify({
          file: path,
          error: { code: result.error.code, message: result.error.message, hdu, keyword, byte },
        }),
      )
    }
  } catch (error) {
    if (!(error instanceof FormatError)) {
      console.error(path, error)
      console.log(JSON.stringify({ file: path, error: { code: 'bug', message: String(error) } }))
    } else {
      const { hdu, keyword, byte } = error.where
      console.log(
        JSON.stringify({ file: path, error: { code: error.code, message: error.message, hdu, keyword, byte } }),
      )
    }
  }
}
