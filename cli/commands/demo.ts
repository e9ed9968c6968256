import { existsSync, readdirSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { demoNight } from '../../src/demo/demoNight.ts'
import { UsageError } from '../../src/errors.ts'
import type { Options } from '../args.ts'
import { writeWhole } from '../write.ts'

/** Writes the invented night into a folder that is new, empty or holds an older demo night. */
export function runDemo(options: Options): number {
  const [folder] = options.paths
  if (existsSync(folder)) {
    if (!statSync(folder).isDirectory()) throw new UsageError(`demo requires a folder, got the file ${folder}`)
    if (readdirSync(folder).length > 0 && !existsSync(join(folder, 'demo-stamp.txt'))) {
      throw new UsageError(`demo requires an empty or new folder, got ${folder} with other files in it`)
    }
  }
  let files = 0
  let bytes = 0
  for (const file of demoNight({ clean: options.clean })) {
    writeWhole(join(folder, file.path), file.bytes)
    files++
    bytes += file.bytes.length
  }
  if (!options.quiet)
    process.stdout.write(
      `${files} files, ${(bytes / 1e6).toFixed(1)} MB, in ${folder}\nnext: darkline night ${folder} --targets ${join(folder, 'targets.csv')}\n`,
    )
  return 0
}
