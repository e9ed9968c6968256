import { createHash } from 'node:crypto'
import type { NightSummary } from '../night/types.ts'
import type { Outcome } from '../quality/types.ts'
import type { Doubt } from './doubts.ts'
import { countsText, doubtsOf, doubtText, nightFindings } from './doubts.ts'
import type { HtmlTarget } from './htmlData.ts'
import { htmlTargets } from './htmlData.ts'
import { HTML_SCRIPT } from './htmlScript.ts'
import { HTML_STYLE } from './htmlStyle.ts'
import type { Provenance } from './provenance.ts'
import { provenanceLine } from './provenance.ts'
import { targetViews } from './targetView.ts'
import { dateAndTime, nightDates } from './timeWords.ts'
import { xmlText } from './votable.ts'
import { duration, percent } from './words.ts'

/** What the page says beside the night, and where its links lead. */
export interface HtmlOptions {
  readonly name: string
  readonly provenance: Provenance
  /** Address of a target's PDF relative to the page, where there is one. */
  readonly pagesOf?: (target: string) => string | undefined
}

const hash = (text: string): string => `'sha256-${createHash('sha256').update(text).digest('base64')}'`

/** JSON that can stand inside a script element: no '<' that could end it. */
const embedded = (data: object): string =>
  JSON.stringify(data).replaceAll('<', '\\u003c').replaceAll('\u2028', '\\u2028').replaceAll('\u2029', '\\u2029')

const MARKS: Readonly<Record<string, string>> = { usable: '●', doubtful: '▲', unusable: '■' }

function row(target: HtmlTarget, index: number): string {
  const number = (value: number | null, shown: string): string =>
    `<td class="number" data-value="${value ?? ''}">${xmlText(shown)}</td>`
  return (
    `<tr data-index="${index}"><th scope="row"><button type="button">${xmlText(target.name)}</button></th>` +
    `<td data-value="${target.typeNumber ?? ''}">${xmlText(target.type)}</td>` +
    `<td>${xmlText(target.range)}</td><td>${xmlText(target.expected)}</td>` +
    number(target.probability, target.probability === null ? '' : percent(target.probability)) +
    number(target.snr, target.snr === null ? '' : target.snr.toFixed(0)) +
    `<td class="${target.quality}"><span class="mark" aria-hidden="true">${MARKS[target.quality]}</span>${target.quality}</td>` +
    `${number(target.urgency, target.urgency === null ? '' : target.urgency.toFixed(2))}</tr>\n`
  )
}

const HEADS = ['target', 'type', '68 % range', 'expected', 'probability', 'S/N', 'quality', 'urgency']
const TOOLS: readonly (readonly [string, string])[] = [
  ['in', 'Zoom in'],
  ['out', 'Zoom out'],
  ['left', 'Left'],
  ['right', 'Right'],
  ['previous', 'Previous feature'],
  ['next', 'Next feature'],
  ['whole', 'Whole'],
]

/**
 * The night as one HTML page that needs nothing else: no network, a content policy that allows its own script and style
 * only. The table stands in the page without the script; with it, it sorts, filters, and shows each spectrum.
 */
export function nightHtml(outcomes: readonly Outcome[], night: NightSummary, options: HtmlOptions): string {
  const { name, provenance, pagesOf = () => undefined } = options
  const views = targetViews(outcomes, night)
  const targets = htmlTargets(views, pagesOf)
  const shown = new Map(targets.map((target, i) => [target.name, i]))
  const last = night.mjdLast ?? night.mjdFirst
  const title =
    night.mjdFirst === undefined || last === undefined
      ? `Night ${name}`
      : `Night of ${nightDates(night.mjdFirst, last)}`
  const policy = `default-src 'none'; script-src ${hash(HTML_SCRIPT)}; style-src ${hash(HTML_STYLE)}; base-uri 'none'; form-action 'none'`
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${xmlText(title)}</title>
<style>${HTML_STYLE}</style>
</head>
<body>
<a class="skip" href="#detail">Skip to the spectrum</a>
<header>
<h1>${xmlText(title)}</h1>
${opening(night, name, doubtsOf(outcomes, night, views), shown)}
</header>
<main>
<div class="panes">
<section aria-labelledby="list">
<h2 id="list">Targets</h2>
<div class="controls">
<label>Filter by any word <input id="filter" type="search" autocomplete="off"></label>
<label>Quality <select id="quality"><option value="">all</option><option>usable</option><option>doubtful</option><option>unusable</option></select></label>
<label class="check"><input id="again" type="checkbox"> only those to observe again</label>
</div>
<p id="shown" class="quiet" role="status"></p>
<div class="scroll" tabindex="0" role="region" aria-label="Table of targets">
<table id="targets">
<thead><tr>${HEADS.map((head) => `<th scope="col"><button type="button">${head}</button></th>`).join('')}</tr></thead>
<tbody>
${targets.map(row).join('')}</tbody>
</table>
</div>
</section>
${DETAIL}
</div>
</main>
<footer><p class="quiet foot">${xmlText(provenanceLine(provenance))}</p></footer>
<script type="application/json" id="night">${embedded({ targets })}</script>
<script>${HTML_SCRIPT}</script>
</body>
</html>
`
}

function opening(
  night: NightSummary,
  name: string,
  doubts: readonly Doubt[],
  shown: ReadonlyMap<string, number>,
): string {
  const { mjdFirst, mjdLast, observeAgain } = night
  const when = mjdFirst === undefined ? '' : `, ${dateAndTime(mjdFirst)} to ${dateAndTime(mjdLast ?? mjdFirst)} UTC`
  const nameCell = (target: string): string => {
    const index = shown.get(target)
    return index === undefined
      ? xmlText(target)
      : `<button type="button" class="jump" data-jump="${index}">${xmlText(target)}</button>`
  }
  const again = observeAgain.map(
    (t) =>
      `<tr><td class="number">${t.urgency.toFixed(2)}</td><th scope="row">${nameCell(t.target)}</th>` +
      `<td class="number">${t.exposureNeeded === undefined ? '' : xmlText(duration(t.exposureNeeded))}</td><td>${xmlText(t.reason)}</td></tr>`,
  )
  const list = (heading: string, items: readonly string[]): string =>
    items.length === 0 ? '' : `<h2>${heading}</h2>\n<ul>${items.map((item) => `<li>${item}</li>`).join('')}</ul>\n`
  return (
    `<p class="lead">${xmlText(countsText(night))}</p>\n<p class="quiet">${xmlText(name + when)}</p>\n` +
    (again.length === 0
      ? ''
      : `<h2>Observe again first</h2>\n<table class="brief"><thead><tr>${['urgency', 'target', 'needs', 'why'].map((head) => `<th scope="col">${head}</th>`).join('')}</tr></thead><tbody>${again.join('')}</tbody></table>\n`) +
    list(
      'Not to be observed again, but look at',
      doubts.map((d) => `${d.level}: ${d.isTarget ? nameCell(d.name) : xmlText(d.name)}: ${xmlText(doubtText(d))}`),
    ) +
    list(
      'What holds for the whole night',
      nightFindings(night).map((f) => xmlText(`${f.level}: ${f.text}`)),
    )
  )
}

const DETAIL = `<section id="detail" class="detail" aria-labelledby="name" tabindex="-1" hidden>
<h2 id="name"></h2>
<p id="verdict" class="lead"></p>
<p id="reason"></p>
<div class="controls"><label>Show <select id="view"><option value="normalised">normalised, at rest</option><option value="observed">as observed</option></select></label>
<span id="range" class="quiet" role="status"></span></div>
<div class="plot"><canvas id="plot" tabindex="0" role="img" aria-label="Spectrum" aria-describedby="keys"></canvas></div>
<div class="tools">${TOOLS.map(([action, label]) => `<button type="button" data-action="${action}">${label}</button>`).join('')}</div>
<p id="keys" class="quiet">With the spectrum in focus: + and − zoom, ← and → move, n and p go to the next and previous feature, 0 shows the whole; drag across a range to zoom into it.</p>
<p id="pages"></p>
<h2>What to watch</h2>
<ul id="findings"></ul>
<h2>Features</h2>
<div class="half" tabindex="0" role="region" aria-label="Table of features">
<table><thead><tr><th scope="col">feature</th><th scope="col">at, Å</th><th scope="col">measured</th><th scope="col">expected</th><th scope="col">part</th></tr></thead><tbody id="features"></tbody></table>
</div>
</section>`
