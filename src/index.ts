/**
 * The public API. `analyseFile` does all that can be done with one file, `nightOf` what only all files together can
 * say; `tableRows` makes the rows of the tables. Everything is plain data, and nothing here touches a disk.
 */
export { FormatError, placeAndMessage, UsageError, type Place } from './errors.ts'
export type { Finding, FindingRule, Note } from './findings/types.ts'
export { memorySource } from './fits/source.ts'
export type { ByteSource, FitsFile, Hdu } from './fits/types.ts'
export type { FluxKind, HeaderFacts, Medium, Site, Spectrum, UncertaintyKind } from './spectrum/types.ts'
export type { ReadResult } from './spectrum/readSpectra.ts'
export type { Continuum } from './continuum/types.ts'
export type { Resolution, RestFrame, ZeroPoint } from './velocity/types.ts'
export type { FoundLine, Measurement } from './features/types.ts'
export type { TypePosterior } from './typing/types.ts'
export type { FrameFacts, FrameStatistics, Outcome, Quality, SpectrumOutcome } from './quality/types.ts'
export { parseTargets } from './night/parseTargets.ts'
export type { NightSummary, Target, TargetSummary } from './night/types.ts'
export { TABLE_NAMES, type Row, type TableName } from './report/row.ts'
export { tableRows } from './report/tableRows.ts'
export { analyseFile, openBytes, spectraOf as readSpectra, type OpenedFile } from './pipeline/analyseFile.ts'
export { analyseSpectrum, type AnalyseOptions } from './pipeline/analyseSpectrum.ts'
export { nightOf, type NightInput } from './pipeline/nightOf.ts'
export { settingsInForce, type InForce } from './pipeline/settingsInForce.ts'
