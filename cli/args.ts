import { UsageError } from '../src/errors.ts'
import yargs from 'yargs'

export const COMMANDS = ['night', 'classify', 'measure', 'check', 'describe', 'settings', 'demo'] as const
export type CommandName = (typeof COMMANDS)[number]

export const FORMATS = ['table', 'csv', 'jsonl', 'fits', 'votable', 'parquet'] as const
export type Format = (typeof FORMATS)[number]

/** What the user asked for, checked; nothing is looked up in the file system yet. */
export interface Options {
  readonly command: CommandName
  readonly paths: readonly string[]
  readonly out?: string
  readonly format?: Format
  readonly workers?: number
  readonly quiet: boolean
  readonly config?: string
  readonly wavelengths?: string
  readonly targets?: string
  readonly watch: boolean
  readonly paper?: 'A4' | 'Letter'
  readonly pages: boolean
  readonly why: boolean
  readonly allLines: boolean
  readonly saveNormalized: boolean
  readonly hdus: boolean
  readonly verify: boolean
  readonly clean: boolean
}

/** Either what to do, or a text to print (help, version, completion) and be done. */
export type Request = { readonly options: Options } | { readonly text: string }

interface OptionHelp {
  readonly describe: string
  readonly type: 'string' | 'boolean' | 'number'
  readonly choices?: readonly string[]
  readonly for?: readonly CommandName[]
}

/** Every option with the sentence that `--help` and the README print. */
export const OPTION_HELP: Readonly<Record<string, OptionHelp>> = {
  out: { describe: 'Folder for all tables (and pages); made when absent', type: 'string' },
  format: { describe: 'Form of the tables; with --out the default is csv and jsonl', type: 'string', choices: FORMATS },
  workers: { describe: 'Threads that read files; default one a core, 0 for none beside the main one', type: 'number' },
  quiet: { describe: 'No progress and no remarks; results and errors only', type: 'boolean' },
  config: { describe: 'TOML file with thresholds and options (see `darkline settings`)', type: 'string' },
  wavelengths: { describe: 'FITS file that holds the wavelengths of the spectra named', type: 'string' },
  targets: {
    describe:
      'Target list, CSV: object, ra, dec, mag, pm_ra_mas, pm_dec_mas, epoch, expected_type, wanted_snr, priority, note',
    type: 'string',
    for: ['night'],
  },
  watch: {
    describe: 'Stay, handle files as they arrive, keep tables and pages current; ends on interrupt',
    type: 'boolean',
    for: ['night'],
  },
  pages: { describe: 'Write PDF and HTML pages (--no-pages for tables only)', type: 'boolean', for: ['night'] },
  paper: { describe: 'Paper of the PDF pages', type: 'string', choices: ['A4', 'Letter'], for: ['night'] },
  'save-normalized': {
    describe: 'Also write each normalised rest-frame spectrum as FITS (needs --out)',
    type: 'boolean',
    for: ['night', 'classify', 'measure'],
  },
  why: { describe: 'Print for each spectrum the features and ratios that decided', type: 'boolean', for: ['classify'] },
  'all-lines': {
    describe: 'Find every significant line without being told where to look, and name candidates',
    type: 'boolean',
    for: ['measure'],
  },
  hdus: { describe: 'One entry an HDU instead of one a spectrum', type: 'boolean', for: ['describe'] },
  verify: { describe: 'Check the checksums of every HDU', type: 'boolean', for: ['describe'] },
  clean: { describe: 'A night without planted troubles', type: 'boolean', for: ['demo'] },
}

interface CommandHelp {
  readonly arguments: string
  readonly describe: string
  readonly examples: readonly (readonly [string, string])[]
}

/** Every command with its argument, its sentence and examples. */
export const COMMAND_HELP: Readonly<Record<CommandName, CommandHelp>> = {
  night: {
    arguments: 'FOLDER',
    describe: 'The whole job: inventory, checks, types, tables, one PDF per target, the PDF of the night',
    examples: [
      ['darkline night 2026-11-30', 'results in reports/2026-11-30'],
      ['darkline night 2026-11-30 --targets list.csv --out dawn', 'with the target list, results in dawn'],
      ['darkline night /data/tonight --watch', 'at the telescope, while files arrive'],
    ],
  },
  classify: {
    arguments: 'PATH…',
    describe: 'Spectral types with their probabilities, one row a spectrum',
    examples: [
      ['darkline classify star.fits --why', 'the type, and what decided it'],
      ['darkline classify run7/ --format csv > types.csv', 'a folder, as CSV'],
    ],
  },
  measure: {
    arguments: 'PATH…',
    describe: 'Equivalent widths and band strengths with errors, one row a feature',
    examples: [
      ['darkline measure star.fits', 'the known features'],
      ['darkline measure nebula.fits --all-lines', 'every line that is there, with candidates'],
    ],
  },
  check: {
    arguments: 'PATH…',
    describe: 'What is wrong with the data; the exit status says whether anything is unusable',
    examples: [['darkline check latest.fits --format jsonl', 'for a script at the telescope']],
  },
  describe: {
    arguments: 'PATH…',
    describe: 'How each file was understood: HDUs, axis, medium, units, columns',
    examples: [
      ['darkline describe odd.fits', 'what the reader made of it'],
      ['darkline describe odd.fits --hdus --verify', 'its HDUs, checksums checked'],
    ],
  },
  settings: {
    arguments: '',
    describe: 'Every threshold and option in force, and where it came from',
    examples: [
      ['darkline settings --format table', 'to read'],
      ['darkline settings > my.toml', 'a file to start from'],
    ],
  },
  demo: {
    arguments: 'FOLDER',
    describe: 'Writes an invented night to try the program on',
    examples: [['darkline demo try && darkline night try --targets try/targets.csv', 'make it, then look at it']],
  },
}

/**
 * What the command line asks for.
 *
 * @param words    arguments after the program's name
 * @param version  as printed by --version
 * @param width    columns of the terminal, for help
 * @throws UsageError for anything that is not understood
 */
export async function readArguments(words: readonly string[], version: string, width: number): Promise<Request> {
  let text = ''
  let failure: Error | undefined
  let parser = yargs([...words])
    .scriptName('darkline')
    .parserConfiguration({
      'strip-aliased': true,
      'parse-positional-numbers': false,
      'populate--': false,
      'dot-notation': false,
    })
    .usage(
      'darkline: what came off the night? Types, line strengths and checks of stellar spectra in FITS files.\n\n$0 COMMAND …',
    )
    .version(version)
    .help()
    .alias('help', 'h')
    .completion('completion', 'Print a script for tab completion (bash, zsh)')
    .strict()
    .recommendCommands()
    .demandCommand(1, 'a command is required, got none')
    .wrap(Math.min(width, 110))
    .exitProcess(false)
    .showHelpOnFail(false)
    .fail((message, error) => {
      failure = error ?? new UsageError(plainly(message, words))
    })
  for (const name of COMMANDS) {
    const help = COMMAND_HELP[name]
    parser = parser.command(help.arguments ? `${name} [paths..]` : name, help.describe, (y) => {
      let command = y.usage(`$0 ${name} ${help.arguments}\n\n${help.describe}.`)
      if (help.arguments)
        command = command.positional('paths', {
          describe: help.arguments === 'FOLDER' ? 'A folder' : 'Files and folders',
          type: 'string',
          array: true,
        })
      for (const [option, about] of Object.entries(OPTION_HELP)) {
        if (about.for && !about.for.includes(name)) continue
        command = command.option(option, {
          describe: about.describe,
          type: about.type,
          ...(about.choices ? { choices: about.choices } : {}),
          requiresArg: about.type !== 'boolean',
        })
      }
      for (const [line, what] of help.examples) command = command.example(line, what)
      return command
    })
  }
  const argv = await parser.parse([...words], {}, (_error: Error | undefined, _argv: unknown, output: string) => {
    text = output
  })
  if (failure) throw failure instanceof UsageError ? failure : new UsageError(failure.message)
  if (text) return { text }
  return { options: toOptions(argv as Record<string, unknown>) }
}

/** The complaint of the parser in the grammar of all messages: NAME requires RULE, got VALUE. */
function plainly(message: string, words: readonly string[]): string {
  const [first] = words
  if (first !== undefined && !first.startsWith('-') && !COMMANDS.some((name) => name === first))
    return `command requires one of ${COMMANDS.join(', ')}, got ${first}`
  const choice = /Argument: (\S+), Given: (.*), Choices: (.*)/.exec(message)
  if (choice)
    return `--${choice[1]} requires one of ${choice[3].replaceAll('"', '')}, got ${choice[2].replaceAll('"', '')}`
  const bare = /^Not enough arguments following: (\S+)/.exec(message)
  if (bare) return `--${bare[1]} requires a value, got none`
  const unknown = /^Unknown arguments?: (.*)/s.exec(message)
  if (unknown)
    return `${first ?? 'darkline'} requires options it knows (see: darkline ${first ?? ''} --help), got ${unknown[1]}`
  return message
}

/** An option given twice counts as given last. */
function lastOf(value: unknown): unknown {
  return Array.isArray(value) ? value.at(-1) : value
}

function toOptions(given: Record<string, unknown>): Options {
  const argv: Record<string, unknown> = { ...given }
  for (const name of Object.keys(OPTION_HELP)) argv[name] = lastOf(given[name])
  const [command, ...rest] = (argv._ as (string | number)[]).map(String)
  const name = COMMANDS.find((known) => known === command)
  if (!name) throw new UsageError(`command requires one of ${COMMANDS.join(', ')}, got ${command ?? 'none'}`)
  const paths = [...((argv.paths as string[] | undefined) ?? []).map(String), ...rest]
  const { workers } = argv
  if (workers !== undefined && !(Number.isInteger(workers) && (workers as number) >= 0 && (workers as number) <= 256)) {
    throw new UsageError(`--workers requires a whole number from 0 to 256, got ${String(workers)}`)
  }
  if (name === 'settings' ? paths.length > 0 : paths.length === 0) {
    throw new UsageError(
      name === 'settings'
        ? `settings requires no path, got ${paths[0]}`
        : `${name} requires ${COMMAND_HELP[name].arguments}, got none (see: darkline ${name} --help)`,
    )
  }
  if ((name === 'night' || name === 'demo') && paths.length > 1)
    throw new UsageError(`${name} requires one folder, got ${paths.length}: ${paths.join(', ')}`)
  for (const path of paths)
    if (path === '') throw new UsageError('path requires at least one character, got an empty text')
  const text = (key: string): string | undefined => {
    if (argv[key] === '') throw new UsageError(`--${key} requires at least one character, got an empty text`)
    return argv[key] === undefined ? undefined : String(argv[key])
  }
  return {
    command: name,
    paths,
    out: text('out'),
    format: argv.format as Format | undefined,
    workers: workers as number | undefined,
    quiet: argv.quiet === true,
    config: text('config'),
    wavelengths: text('wavelengths'),
    targets: text('targets'),
    watch: argv.watch === true,
    paper: argv.paper as 'A4' | 'Letter' | undefined,
    pages: argv.pages !== false,
    why: argv.why === true,
    allLines: argv['all-lines'] === true,
    saveNormalized: argv['save-normalized'] === true,
    hdus: argv.hdus === true,
    verify: argv.verify === true,
    clean: argv.clean === true,
  }
}
