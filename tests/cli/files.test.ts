import { mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { findFiles } from '../../cli/files.ts'

const root = mkdtempSync(join(tmpdir(), 'darkline-files-'))
afterAll(() => rmSync(root, { recursive: true, force: true }))
for (const folder of ['a', 'b', 'b/deep', 'odd']) mkdirSync(join(root, folder))
for (const name of [
  'a.fits',
  'a/2.fit',
  'a/10.FITS.GZ',
  'a/notes.txt',
  'b/deep/x.fts',
  'b/old.fits.Z',
  'b.fits',
  'odd/=cmd.fits',
])
  writeFileSync(join(root, name), 'x')
writeFileSync(join(root, 'a/frame0001'), 'SIMPLE  =                    T')
symlinkSync('self', join(root, 'self'))
symlinkSync(root, join(root, 'b/circle'))
symlinkSync(join(root, 'nowhere'), join(root, 'b/dangling.fits'))

const names = (paths: string[]): string[] =>
  [...findFiles(paths)].map((answer) =>
    ('found' in answer ? answer.found.file : `${answer.problem.code}: ${answer.problem.file}`).replaceAll(root, 'ROOT'),
  )

describe('findFiles', () => {
  it('goes through a folder in byte order of the path and takes what looks like FITS by name or first bytes', () => {
    expect(names([root])).toEqual([
      'ROOT/a.fits',
      'ROOT/a/10.FITS.GZ',
      'ROOT/a/2.fit',
      'ROOT/a/frame0001',
      'ROOT/b.fits',
      'link-in-a-circle: ROOT/b/circle',
      'no-such-path: ROOT/b/dangling.fits',
      'ROOT/b/deep/x.fts',
      'ROOT/b/old.fits.Z',
      'ROOT/odd/=cmd.fits',
    ])
  })

  it('takes a named file whatever it is called, and answers for a path that does not exist', () => {
    expect(names([`${root}/a/notes.txt`, `${root}/none`])).toEqual(['ROOT/a/notes.txt', 'no-such-path: ROOT/none'])
  })

  it('drops a leading ./ and keeps the order of the paths given', () => {
    const here = process.cwd()
    try {
      process.chdir(root)
      expect(names(['./b.fits', './a'])).toEqual(['b.fits', 'a/10.FITS.GZ', 'a/2.fit', 'a/frame0001'])
      expect(names(['.'])[0]).toBe('a.fits')
    } finally {
      process.chdir(here)
    }
  })

  it('answers for links to themselves, names too long, paths below a file, devices, and names that are no UTF-8', () => {
    const long = 'x'.repeat(300)
    expect(names([`${root}/self`, `${root}/${long}`, `${root}/a.fits/b`, '/dev/null'])).toEqual([
      'unreadable: ROOT/self',
      `unreadable: ROOT/${long}`,
      'unreadable: ROOT/a.fits/b',
      'not-a-file: /dev/null',
    ])
    const odd = Buffer.concat([Buffer.from(join(root, 'odd/')), Buffer.of(0xff, 0x41)])
    writeFileSync(odd, 'x')
    // as the runtime hands over the argument: bytes that are no UTF-8 become U+FFFD
    const [answer] = findFiles([odd.toString()])
    expect('found' in answer && Buffer.from(answer.found.path as Buffer).equals(odd)).toBe(true)
  })
})
