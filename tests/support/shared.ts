import { existsSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

const FOLDER = fileURLToPath(new URL('../../../shared/', import.meta.url))

/** True where the folder of real data stands beside the checkout. */
export const hasShared: boolean = existsSync(`${FOLDER}design.md`)

/** Absolute path of a file or folder of the shared real data. */
export function sharedPath(relative: string): string {
  return FOLDER + relative
}

/** What a test says when it skips itself for want of the data; for `describe.skipIf(!hasShared)`. */
export const NEEDS_SHARED = 'needs ../shared beside the checkout'
