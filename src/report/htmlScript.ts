/**
 * The program of night.html, for browsers of 2020 and later. It reads the data block `night`, sorts and filters the
 * table that stands in the page already, and draws the chosen spectrum on a canvas that keys, buttons, wheel and
 * pointer can zoom.
 */
export const HTML_SCRIPT = String.raw`
'use strict'
const night = JSON.parse(document.getElementById('night').textContent)
const $ = (id) => document.getElementById(id)
const body = $('targets').tBodies[0]
const rows = [...body.rows]
const canvas = $('plot')
const pen = canvas.getContext('2d')
const state = { target: -1, view: 'normalised', from: 0, to: 1, full: [0, 1], drag: null }

// ---- table
function cellKey(row, column) {
  const cell = row.cells[column]
  const value = cell.dataset.value
  return value === undefined ? cell.textContent.trim().toLowerCase() : value === '' ? null : Number(value)
}
function sortBy(head) {
  const up = head.getAttribute('aria-sort') !== 'ascending'
  for (const other of head.parentNode.cells) other.removeAttribute('aria-sort')
  head.setAttribute('aria-sort', up ? 'ascending' : 'descending')
  const column = head.cellIndex
  const order = rows.map((row, i) => ({ row, i, key: cellKey(row, column) }))
  order.sort((a, b) => {
    if (a.key === null || b.key === null) return a.key === b.key ? a.i - b.i : a.key === null ? 1 : -1
    const by = typeof a.key === 'number' ? a.key - b.key : a.key.localeCompare(b.key, 'en', { numeric: true })
    return (up ? by : -by) || a.i - b.i
  })
  body.append(...order.map((o) => o.row))
}
for (const head of $('targets').tHead.rows[0].cells) head.firstElementChild.addEventListener('click', () => sortBy(head))

function filter() {
  const words = $('filter').value.toLowerCase().split(/\s+/).filter(Boolean)
  const quality = $('quality').value
  const onlyAgain = $('again').checked
  let shown = 0
  for (const row of rows) {
    const target = night.targets[Number(row.dataset.index)]
    const text = row.textContent.toLowerCase()
    const fits = words.every((w) => text.includes(w)) && (quality === '' || target.quality === quality) && (!onlyAgain || target.again !== null)
    row.hidden = !fits
    if (fits) shown++
  }
  $('shown').textContent = shown + ' of ' + rows.length + ' targets shown'
}
for (const id of ['filter', 'quality', 'again']) $(id).addEventListener('input', filter)

body.addEventListener('click', (event) => {
  const row = event.target.closest('tr')
  if (row) choose(Number(row.dataset.index))
})
body.addEventListener('keydown', (event) => {
  const step = { ArrowDown: 1, ArrowUp: -1 }[event.key]
  const row = event.target.closest('tr')
  if (!step || !row) return
  let next = row
  do next = step > 0 ? next.nextElementSibling : next.previousElementSibling
  while (next && next.hidden)
  if (!next) return
  event.preventDefault()
  next.querySelector('button').focus()
  choose(Number(next.dataset.index))
})

// ---- one target
function text(tag, content, name) {
  const element = document.createElement(tag)
  element.textContent = content
  if (name) element.className = name
  return element
}
function choose(index) {
  state.target = index
  const target = night.targets[index]
  for (const row of rows) {
    if (Number(row.dataset.index) === index) row.setAttribute('aria-current', 'true')
    else row.removeAttribute('aria-current')
  }
  $('name').textContent = target.name
  $('verdict').textContent = target.verdict
  $('reason').textContent = target.again === null ? '' : 'Observe again: ' + target.again
  $('reason').hidden = target.again === null
  $('pages').replaceChildren()
  if (target.pages) {
    const link = text('a', 'Pages of this target (PDF)')
    link.href = target.pages
    $('pages').append(link)
  }
  $('findings').replaceChildren(...(target.findings.length ? target.findings : [['', 'nothing was found against it']]).map(([level, what]) => text('li', (level ? level + ': ' : '') + what)))
  $('features').replaceChildren(...target.features.map((f) => {
    const row = document.createElement('tr')
    const head = text('th', f[0])
    head.scope = 'row'
    row.append(head, text('td', f[1].toFixed(1), 'number'), text('td', f[2], 'number'), text('td', f[3], 'number'), text('td', f[4], 'number'))
    return row
  }))
  $('detail').hidden = false
  curves = target.curves ? decode(target.curves) : null
  $('view').querySelector('[value=observed]').disabled = !curves || !curves.flux
  whole()
}

// ---- curves: little-endian 16-bit steps between two values, 65535 for none
let curves = null
function bytes(base64) {
  const raw = atob(base64)
  const out = new Uint8Array(raw.length)
  for (let i = 0; i < raw.length; i++) out[i] = raw.charCodeAt(i)
  return out
}
function series(packed) {
  if (!packed) return null
  const view = new DataView(bytes(packed.data).buffer)
  const out = new Float64Array(view.byteLength / 2)
  for (let i = 0; i < out.length; i++) {
    const step = view.getUint16(2 * i, true)
    out[i] = step === 65535 ? NaN : packed.low + (step / 65534) * (packed.high - packed.low)
  }
  return out
}
function wavelengths(packed) {
  const view = new DataView(bytes(packed.data).buffer)
  const out = new Float64Array(view.byteLength / 4)
  for (let i = 0; i < out.length; i++) out[i] = view.getFloat32(4 * i, true)
  return out
}
function decode(c) {
  return { rest: wavelengths(c.rest), normalised: series(c.normalised), expected: series(c.expected), shift: c.shift, flux: series(c.flux), continuum: series(c.continuum) }
}
function xs() {
  return state.view === 'normalised' ? curves.rest : curves.rest.map((w) => w * curves.shift)
}

// ---- zoom
function whole() {
  if (curves) {
    const x = xs()
    state.full = [x[0], x[x.length - 1]]
    ;[state.from, state.to] = state.full
  }
  draw()
}
function zoom(factor, about) {
  const at = about === undefined ? (state.from + state.to) / 2 : about
  span(at - (at - state.from) * factor, at + (state.to - at) * factor)
}
function span(from, to) {
  const [first, last] = state.full
  const width = Math.min(last - first, Math.max(8, to - from))
  const middle = (from + to) / 2
  state.from = Math.max(first, Math.min(last - width, middle - width / 2))
  state.to = state.from + width
  draw()
}
function pan(part) {
  const shift = (state.to - state.from) * part
  span(state.from + shift, state.to + shift)
}
function toFeature(step) {
  const target = night.targets[state.target]
  if (!target || !curves) return
  const shift = state.view === 'normalised' ? 1 : curves.shift
  const places = target.features.map((f) => f[1] * shift).filter((w) => w > state.full[0] && w < state.full[1]).sort((a, b) => a - b)
  const middle = (state.from + state.to) / 2
  const next = step > 0 ? places.find((w) => w > middle + 0.5) : places.reverse().find((w) => w < middle - 0.5)
  if (next !== undefined) span(next - 60, next + 60)
}
const actions = { in: () => zoom(0.6), out: () => zoom(1 / 0.6), left: () => pan(-0.25), right: () => pan(0.25), whole, next: () => toFeature(1), previous: () => toFeature(-1) }
for (const button of document.querySelectorAll('[data-action]')) button.addEventListener('click', () => actions[button.dataset.action]())
$('view').addEventListener('change', () => { state.view = $('view').value; whole() })
const KEYS = { '+': 'in', '=': 'in', '-': 'out', ArrowLeft: 'left', ArrowRight: 'right', '0': 'whole', Home: 'whole', n: 'next', p: 'previous' }
canvas.addEventListener('keydown', (event) => {
  const action = KEYS[event.key]
  if (!action || event.ctrlKey || event.metaKey || event.altKey) return
  event.preventDefault()
  actions[action]()
})
const atPointer = (event) => {
  const box = canvas.getBoundingClientRect()
  return state.from + ((event.clientX - box.left - LEFT) / (box.width - LEFT - RIGHT)) * (state.to - state.from)
}
canvas.addEventListener('wheel', (event) => {
  if (document.activeElement !== canvas) return
  event.preventDefault()
  zoom(event.deltaY > 0 ? 1.2 : 1 / 1.2, atPointer(event))
}, { passive: false })
canvas.addEventListener('pointerdown', (event) => {
  canvas.setPointerCapture(event.pointerId)
  state.drag = [atPointer(event), atPointer(event)]
})
canvas.addEventListener('pointermove', (event) => {
  if (!state.drag) return
  state.drag[1] = atPointer(event)
  draw()
})
canvas.addEventListener('pointerup', () => {
  const drag = state.drag
  state.drag = null
  if (drag && Math.abs(drag[1] - drag[0]) > (state.to - state.from) * 0.01) span(Math.min(...drag), Math.max(...drag))
  else draw()
})
canvas.addEventListener('pointercancel', () => { state.drag = null; draw() })
canvas.addEventListener('dblclick', whole)
addEventListener('resize', draw)

// ---- drawing
const LEFT = 52, RIGHT = 10, TOP = 40, BOTTOM = 34
function steps(low, high, count) {
  const rough = (high - low) / count
  const power = 10 ** Math.floor(Math.log10(rough))
  const step = [1, 2, 5, 10].map((m) => m * power).find((s) => s >= rough) || rough
  const out = []
  for (let k = Math.ceil(low / step); k * step <= high; k++) out.push(Number((k * step).toPrecision(10)))
  return out
}
function limits(x, list) {
  let low = Infinity, high = -Infinity
  for (const y of list) {
    if (!y) continue
    const kept = []
    for (let i = 0; i < x.length; i++) if (x[i] >= state.from && x[i] <= state.to && Number.isFinite(y[i])) kept.push(y[i])
    kept.sort((a, b) => a - b)
    if (!kept.length) continue
    low = Math.min(low, kept[Math.floor((kept.length - 1) * 0.0005)])
    high = Math.max(high, kept[Math.ceil((kept.length - 1) * 0.998)])
  }
  if (!(high > low)) return low === high ? [low - 0.5, high + 0.5] : [0, 1]
  const margin = (high - low) * 0.06
  return [low - margin, high + margin]
}
function draw() {
  const box = canvas.getBoundingClientRect()
  const ratio = devicePixelRatio || 1
  canvas.width = Math.round(box.width * ratio)
  canvas.height = Math.round(box.height * ratio)
  pen.setTransform(ratio, 0, 0, ratio, 0, 0)
  pen.fillStyle = '#fff'
  pen.fillRect(0, 0, box.width, box.height)
  pen.font = '12px system-ui, "DejaVu Sans", sans-serif'
  const target = night.targets[state.target]
  if (!target) return
  const isNormalised = state.view === 'normalised'
  const main = curves && (isNormalised ? curves.normalised : curves.flux)
  if (!main) {
    pen.fillStyle = '#5c5c5c'
    pen.fillText('No curve was kept for this spectrum.', LEFT, TOP)
    describe(target, true)
    return
  }
  const x = xs()
  const under = isNormalised ? curves.expected : curves.continuum
  const [low, high] = limits(x, [main, under])
  const width = box.width - LEFT - RIGHT, height = box.height - TOP - BOTTOM
  const px = (v) => LEFT + ((v - state.from) / (state.to - state.from)) * width
  const py = (v) => TOP + height - ((v - low) / (high - low)) * height
  axes({ low, high, px, py, width, height, isNormalised })
  pen.save()
  pen.beginPath()
  pen.rect(LEFT, TOP, width, height)
  pen.clip()
  if (under) line(x, under, px, py, isNormalised ? { color: '#56b4e9', width: 3.5, dash: [] } : { color: '#d55e00', width: 1.8, dash: [7, 4] })
  line(x, main, px, py, { color: '#1a1a1a', width: 1, dash: [] })
  if (state.drag) {
    pen.fillStyle = 'rgba(0, 89, 140, 0.15)'
    pen.fillRect(px(state.drag[0]), TOP, px(state.drag[1]) - px(state.drag[0]), height)
  }
  pen.restore()
  names(target, px, height)
  describe(target, false)
}
function axes({ low, high, px, py, width, height, isNormalised }) {
  pen.strokeStyle = '#1a1a1a'
  pen.fillStyle = '#1a1a1a'
  pen.lineWidth = 1
  pen.setLineDash([])
  pen.strokeRect(LEFT + 0.5, TOP + 0.5, width, height)
  pen.textAlign = 'center'
  for (const v of steps(state.from, state.to, Math.max(3, width / 90))) {
    pen.fillRect(px(v), TOP + height, 1, 5)
    pen.fillText(String(v), px(v), TOP + height + 17)
  }
  pen.textAlign = 'right'
  const size = Math.max(Math.abs(low), Math.abs(high))
  for (const v of steps(low, high, 5)) {
    pen.fillRect(LEFT - 4, py(v), 5, 1)
    pen.fillText(size >= 1e4 || size < 1e-2 ? v.toExponential(1) : String(v), LEFT - 7, py(v) + 4)
  }
  pen.fillStyle = '#5c5c5c'
  pen.fillText(isNormalised ? 'rest wavelength in air, Å' : 'wavelength in air, Å', LEFT + width, TOP + height + 31)
  pen.textAlign = 'left'
  pen.fillText(isNormalised ? 'flux ÷ continuum' + (curves.expected ? '; wide pale line: expected, smoothed, level matched' : '') : 'flux; dashed: continuum', LEFT, TOP + height + 31)
}
function line(x, y, px, py, style) {
  pen.strokeStyle = style.color
  pen.lineWidth = style.width
  pen.setLineDash(style.dash)
  pen.beginPath()
  let down = false
  for (let i = 0; i < x.length; i++) {
    if (!Number.isFinite(y[i])) { down = false; continue }
    if (x[i + 1] < state.from || x[i - 1] > state.to) continue
    if (down) pen.lineTo(px(x[i]), py(y[i]))
    else pen.moveTo(px(x[i]), py(y[i]))
    down = true
  }
  pen.stroke()
  pen.setLineDash([])
}
function names(target, px, height) {
  const shift = state.view === 'normalised' ? 1 : curves.shift
  const shown = target.features.filter((f) => f[1] * shift >= state.from && f[1] * shift <= state.to).sort((a, b) => b[5] - a[5])
  const taken = [[], []]
  pen.textAlign = 'center'
  for (const f of shown) {
    const at = px(f[1] * shift)
    pen.fillStyle = f[5] >= 0.03 ? '#1a1a1a' : '#767676'
    pen.fillRect(at - 0.5, TOP - 6, 1, 6 + height * (f[5] >= 0.03 ? 0.06 : 0.03))
    const half = pen.measureText(f[0]).width / 2 + 3
    const row = taken.findIndex((spans) => spans.every(([a, b]) => at + half < a || at - half > b))
    if (row < 0 || at - half < 0 || at + half > LEFT + RIGHT + canvas.clientWidth) continue
    taken[row].push([at - half, at + half])
    pen.fillText(f[0], at, TOP - 9 - 14 * row)
  }
}
let told = ''
function describe(target, isEmpty) {
  const range = isEmpty ? 'no curve' : state.from.toFixed(0) + ' to ' + state.to.toFixed(0) + ' Å'
  const words = (state.view === 'normalised' ? 'Normalised spectrum of ' : 'Spectrum of ') + target.name + ', ' + range
  canvas.setAttribute('aria-label', words)
  if (told !== words) $('range').textContent = range
  told = words
}
filter()
for (const jump of document.querySelectorAll('.jump')) jump.addEventListener('click', () => {
  choose(Number(jump.dataset.jump))
  $('detail').focus()
  $('detail').scrollIntoView({ block: 'nearest' })
})
const urgent = document.querySelector('table.brief .jump')
if (rows.length) choose(Number(urgent ? urgent.dataset.jump : rows[0].dataset.index))
`
