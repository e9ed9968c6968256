import { execFileSync } from 'node:child_process'
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import ts from 'typescript'
import { describe, expect, it } from 'vitest'
import { COMMANDS, OPTION_HELP } from '../cli/args.ts'
import { FEATURE_RULES } from '../src/findings/features.ts'
import { NIGHT_RULES } from '../src/findings/night.ts'
import { QUALITY_RULES } from '../src/findings/quality.ts'
import { READING_RULES } from '../src/findings/reading.ts'
import { TYPING_RULES } from '../src/findings/typing.ts'
import { VELOCITY_RULES } from '../src/findings/velocity.ts'
import { SOURCES } from '../src/tables/sources.ts'

// The rules of this code base that neither the compiler, the linter nor dependency-cruiser can check.

const ROOT = fileURLToPath(new URL('..', import.meta.url))
const read = (path: string): string => readFileSync(join(ROOT, path), 'utf8')
const filesBelow = (folder: string): string[] =>
  readdirSync(join(ROOT, folder), { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name).slice(ROOT.length))
    .sort()
const codeBelow = (folder: string): string[] => filesBelow(folder).filter((path) => path.endsWith('.ts'))

const SRC = codeBelow('src')
const PROGRAM = [...codeBelow('cli'), ...SRC]
const CODE = [...PROGRAM, ...codeBelow('tests')]
const TEXT = new Map(CODE.map((path) => [path, read(path)]))
const textOf = (path: string): string => TEXT.get(path) ?? ''
const isTable = (path: string): boolean => path.startsWith('src/tables/')

/** Every node of the files that are given, with the file it stands in. */
function* nodes(paths: readonly string[]): Generator<{ path: string; node: ts.Node; source: ts.SourceFile }> {
  for (const path of paths) {
    const source = ts.createSourceFile(path, textOf(path), ts.ScriptTarget.ES2023, true)
    const open: ts.Node[] = [source]
    for (let node = open.pop(); node; node = open.pop()) {
      yield { path, node, source }
      ts.forEachChild(node, (child) => void open.push(child))
    }
  }
}

describe('files', () => {
  it('stand on the top level by these names only', () => {
    const known = ['LICENSE', 'DEVELOPERS.md', 'README.md', 'package.json', 'package-lock.json', 'tsconfig.json']
    const folders = ['cli', 'src', 'tests', 'samples', 'reports']
    const made = ['node_modules', 'dist', 'coverage']
    const found = readdirSync(ROOT).filter((name) => !name.startsWith('.') && !/\.(tgz|log)$/.test(name))
    expect(found.filter((name) => ![...known, ...folders, ...made].includes(name))).toEqual([])
  })

  it('of the program have at most 400 lines, tables apart', () => {
    const long = PROGRAM.filter((path) => !isTable(path) && textOf(path).trimEnd().split('\n').length > 400)
    expect(long).toEqual([])
  })

  it('are named for what they hold', () => {
    const bare = PROGRAM.filter((path) => /(^|\/)(utils?|helpers?|common|misc)(\.ts|\/)/i.test(path))
    const uneven = PROGRAM.filter((path) => !/\/[a-z][A-Za-z0-9]*\.ts$/.test(path))
    expect([...bare, ...uneven]).toEqual([])
  })

  it('hold no deferred work, machine paths or registry hosts', () => {
    const forbidden = [/\bTODO\b|\bFIXME\b/, /(?<![\w./])\/(work|root|home)\//, /registry\.[a-z]+\.[a-z]+/]
    const plain = ['README.md', 'DEVELOPERS.md', 'samples/README.md', 'reports/README.md', 'package-lock.json']
    const own = 'tests/rules.test.ts'
    const found = [...CODE.filter((path) => path !== own), ...plain].flatMap((path) =>
      forbidden.filter((pattern) => pattern.test(TEXT.get(path) ?? read(path))).map((pattern) => `${path}: ${pattern}`),
    )
    expect(found).toEqual([])
  })

  it('of tests/data have a row in its README', () => {
    const data = existsSync(join(ROOT, 'tests/data')) ? filesBelow('tests/data') : []
    const rows = data.includes('tests/data/README.md') ? read('tests/data/README.md') : ''
    const stray = data.filter((path) => !path.endsWith('README.md') && !rows.includes(path.slice('tests/data/'.length)))
    expect(stray).toEqual([])
  })

  it('leave no changed golden behind in the repository', () => {
    if (!existsSync(join(ROOT, '.git'))) return
    const kept = execFileSync('git', ['ls-files', 'tests/golden'], { cwd: ROOT, encoding: 'utf8' })
    expect(kept).not.toMatch(/-changed\./)
  })
})

describe('exports', () => {
  it('have a docstring, types of one line apart', () => {
    const bare: string[] = []
    for (const { path, node, source } of nodes(PROGRAM.filter((one) => !isTable(one)))) {
      if (!ts.isFunctionDeclaration(node) && !ts.isInterfaceDeclaration(node) && !ts.isClassDeclaration(node)) continue
      const isExported = node.modifiers?.some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword)
      if (isExported && ts.getJSDocCommentsAndTags(node).length === 0)
        bare.push(`${path}: ${node.name?.getText(source)}`)
    }
    expect(bare).toEqual([])
  })
})

describe('errors', () => {
  it('say NAME requires RULE, got VALUE, without a full stop', () => {
    const wrong: string[] = []
    let checked = 0
    for (const { path, node, source } of nodes(PROGRAM)) {
      if (!ts.isNewExpression(node) || !/^(FormatError|RangeError|TypeError)$/.test(node.expression.getText(source)))
        continue
      const message = node.arguments?.[node.expression.getText(source) === 'FormatError' ? 1 : 0]
      if (!message || !(ts.isStringLiteralLike(message) || ts.isTemplateExpression(message))) continue
      // A message that passes on another with the place in front.
      if (/: \$\{\w+\.message\}`$/.test(message.getText(source))) continue
      checked++
      const text = message.getText(source).slice(1, -1)
      if (!/ requires? .+, got /s.test(text) || text.endsWith('.')) wrong.push(`${path}: ${text}`)
    }
    expect(wrong).toEqual([])
    expect(checked).toBeGreaterThan(20)
  })
})

describe('findings', () => {
  const RULES = { FEATURE_RULES, NIGHT_RULES, QUALITY_RULES, READING_RULES, TYPING_RULES, VELOCITY_RULES }
  const literals = new Set<string>()
  const wrong: string[] = []
  for (const { path, node, source } of nodes(SRC.filter((one) => !one.startsWith('src/findings/')))) {
    if (ts.isStringLiteralLike(node)) literals.add(node.text)
    if (!ts.isCallExpression(node) || node.expression.getText(source) !== 'finding') continue
    const name = node.arguments[0].getText(source)
    const rules = Object.entries(RULES).find(([key]) => key === name)?.[1]
    const codes = [...node.arguments[1].getText(source).matchAll(/'([a-z0-9-]+)'/g)].map((match) => match[1])
    if (rules) wrong.push(...codes.filter((code) => !(code in rules)).map((code) => `${path}: ${name} ${code}`))
  }

  it('are made by a code that stands in their table', () => {
    expect(wrong).toEqual([])
  })

  it('have no rule without a use, and no code twice', () => {
    const codes = Object.values(RULES).flatMap((rules) => Object.keys(rules))
    expect(codes.filter((code) => !literals.has(code))).toEqual([])
    expect(codes.filter((code, i) => codes.indexOf(code) !== i)).toEqual([])
  })
})

describe('tables', () => {
  it('name sources that exist, each used and with a citation', () => {
    const used = new Set<string>()
    for (const { node } of nodes([...SRC.filter(isTable), ...codeBelow('src/demo')])) {
      if (!ts.isPropertyAssignment(node) && !ts.isShorthandPropertyAssignment(node)) continue
      if (node.name.getText() !== 'source') continue
      if (ts.isPropertyAssignment(node) && ts.isStringLiteralLike(node.initializer)) used.add(node.initializer.text)
    }
    const keys: string[] = Object.keys(SOURCES)
    expect([...used].filter((key) => !keys.includes(key))).toEqual([])
    for (const [key, { citation }] of Object.entries(SOURCES)) expect(citation.length, key).toBeGreaterThan(10)
    // A key counts as used where a table names it in any way, as the argument of a row's maker too.
    const all = SRC.filter((path) => path !== 'src/tables/sources.ts')
      .map(textOf)
      .join('\n')
    const citedInDocstrings = ['fits4', 'ciddor1996']
    expect(keys.filter((key) => !citedInDocstrings.includes(key) && !all.includes(`'${key}'`))).toEqual([])
  })
})

describe('the documents', () => {
  const DOCUMENTS = ['README.md', 'DEVELOPERS.md', 'samples/README.md', 'reports/README.md']

  it('link only to what is there', () => {
    const dead = DOCUMENTS.flatMap((path) =>
      [...read(path).matchAll(/\]\(([^)#\s]+)[^)]*\)/g)]
        .map((match) => match[1])
        .filter((link) => !/^https?:/.test(link) && !existsSync(join(ROOT, dirname(path), link)))
        .map((link) => `${path}: ${link}`),
    )
    expect(dead).toEqual([])
  })

  it('name only paths, commands, options and scripts that exist', () => {
    const scripts = Object.keys((JSON.parse(read('package.json')) as { scripts: object }).scripts)
    const wrong = DOCUMENTS.flatMap((path) => {
      const text = read(path)
      const names = (pattern: RegExp): string[] => [...text.matchAll(pattern)].map((match) => match[1])
      return [
        ...names(/`((?:src|cli|tests)\/[\w./]+)`/g).filter((name) => !existsSync(join(ROOT, name))),
        ...names(/npm run ([\w-]+)/g).filter((name) => !scripts.includes(name)),
        ...names(/(?:`|\n)darkline ([a-z]+)/g).filter((name) => !COMMANDS.some((command) => command === name)),
        ...names(/(?<=[`\s])--([a-z][a-z-]+)/g).filter(
          (name) => !(name.replace(/^no-/, '') in OPTION_HELP) && !['help', 'version'].includes(name),
        ),
      ].map((name) => `${path}: ${name}`)
    })
    expect(wrong).toEqual([])
  })
})

describe('package.json', () => {
  interface Package {
    readonly dependencies: Record<string, string>
    readonly devDependencies: Record<string, string>
  }
  const { dependencies, devDependencies } = JSON.parse(read('package.json')) as Package

  it('pins exact versions', () => {
    const loose = Object.entries({ ...dependencies, ...devDependencies }).filter(([, v]) => !/^\d+\.\d+\.\d+$/.test(v))
    expect(loose).toEqual([])
  })

  it('lists what the program imports, each named with its reason in DEVELOPERS.md', () => {
    const developers = read('DEVELOPERS.md')
    expect(Object.keys(dependencies).filter((name) => !developers.includes(name))).toEqual([])
    const imported = new Set(
      PROGRAM.flatMap((path) => [
        ...textOf(path).matchAll(/(?:^(?:import|export|\}).* from '|\bimport\('|\bresolve\(`)([@a-z][\w@/.:-]*)/gm),
      ])
        .map((match) => match[1])
        .filter((name) => !name.startsWith('node:'))
        .map((name) => name.split('/')[0]),
    )
    expect([...imported].sort()).toEqual(Object.keys(dependencies).sort())
  })
})
