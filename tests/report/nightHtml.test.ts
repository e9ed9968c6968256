import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { pathToFileURL } from 'node:url'
import type { Browser, Page } from 'playwright-core'
import { chromium } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { packCurve, thinned } from '../../src/report/htmlData.ts'
import { HTML_SCRIPT } from '../../src/report/htmlScript.ts'
import { nightHtml } from '../../src/report/nightHtml.ts'
import type { NightSummary } from '../../src/night/types.ts'
import { madeNight } from '../support/madeNight.ts'
import { PROVENANCE } from '../support/pageFonts.ts'
import { requireTool } from '../support/tools.ts'

const html = (count: number, change: (night: NightSummary) => NightSummary = (night) => night): string => {
  const { outcomes, night } = madeNight(count)
  return nightHtml(outcomes, change(night), {
    name: 'made night',
    provenance: PROVENANCE,
    pagesOf: (t) => `targets/${t}.pdf`,
  })
}

describe('nightHtml', () => {
  const page = html(9)

  it('asks for nothing outside itself and allows its own script and style only', () => {
    const policy = /Content-Security-Policy" content="([^"]*)"/.exec(page)?.[1] ?? ''
    expect(policy).toContain("default-src 'none'")
    expect(policy).not.toContain('unsafe')
    expect(policy).toContain(createHash('sha256').update(HTML_SCRIPT).digest('base64'))
    expect(page).not.toMatch(/<(?:img|link|iframe)|src=|url\(|@import/)
  })

  it('lets no name end the page or its data', () => {
    const evil = '</script><script>alert(1)</script><!-- " & \u2028'
    const rename = (night: NightSummary): NightSummary => ({
      ...night,
      targets: night.targets.map((t, i) => (i === 0 ? { ...t, target: evil, reason: evil } : t)),
    })
    const text = html(3, rename)
    expect(text.match(/<script/g)).toHaveLength(2)
    const data = /id="night">(.*?)<\/script>/s.exec(text)?.[1] ?? ''
    expect((JSON.parse(data) as { targets: { name: string }[] }).targets[0].name).toBe(evil)
  })

  it('gives the same bytes for the same night', () => expect(html(9)).toBe(page))

  it('stays below 10 MB for 500 targets', () => expect(html(500).length).toBeLessThan(10e6))
})

describe('packCurve', () => {
  it('keeps a curve to a 65534th of its range, and its gaps', () => {
    const values = Float64Array.of(1, NaN, 3, 2.5)
    const packed = packCurve(values, [0, 1, 2, 3])
    const view = Buffer.from(packed?.data ?? '', 'base64')
    expect([0, 1, 2, 3].map((i) => view.readUInt16LE(2 * i))).toEqual([0, 65535, 65534, Math.round(0.75 * 65534)])
    expect(packCurve(Float64Array.of(NaN), [0])).toBeNull()
  })
})

describe('thinned', () => {
  it('keeps the lowest and highest sample of every group, in order', () => {
    const values = Float64Array.from({ length: 1000 }, (_, i) => (i === 437 ? -5 : i === 800 ? 9 : Math.sin(i)))
    const kept = thinned(values, 100)
    expect(kept.length).toBeLessThanOrEqual(100)
    expect(kept).toContain(437)
    expect(kept).toContain(800)
    expect(kept).toEqual([...new Set(kept)].sort((a, b) => a - b))
    expect(thinned(values, 5000)).toHaveLength(1000)
  })
})

const hasBrowser = requireTool('chromium')
describe.skipIf(!hasBrowser)('night.html in a browser', () => {
  const folder = mkdtempSync(join(tmpdir(), 'html-'))
  const found = spawnSync('which', ['chromium'], { encoding: 'utf8' }).stdout.trim()
  let browser: Browser
  let page: Page
  const trouble: string[] = []
  const requests: string[] = []

  beforeAll(async () => {
    writeFileSync(join(folder, 'night.html'), html(40))
    browser = await chromium.launch({ executablePath: found, args: ['--no-sandbox'] })
    page = await browser.newPage({ viewport: { width: 1300, height: 900 } })
    page.on('console', (message) => trouble.push(message.text()))
    page.on('pageerror', (error) => trouble.push(error.message))
    page.on('request', (request) => requests.push(request.url()))
    await page.goto(pathToFileURL(join(folder, 'night.html')).href)
  })
  afterAll(async () => {
    await browser?.close()
    if (existsSync(folder)) rmSync(folder, { recursive: true })
  })

  const names = (): Promise<string[]> => page.locator('#targets tbody tr:visible th').allInnerTexts()

  it('loads from a file without errors and without asking for anything else', () => {
    expect(trouble).toEqual([])
    expect(requests).toHaveLength(1)
  })

  it('sorts by a column, one way and the other, absent values last', async () => {
    const head = page.locator('#targets thead button', { hasText: 'type' }).first()
    await head.click()
    const up = await page
      .locator('#targets tbody td:nth-child(2)')
      .evaluateAll((cells) => cells.map((c) => c.getAttribute('data-value')))
    const numbers = up.filter((v) => v !== '').map(Number)
    expect(numbers).toEqual([...numbers].sort((a, b) => a - b))
    expect(up.slice(numbers.length).every((v) => v === '')).toBe(true)
    expect(await page.locator('#targets th[aria-sort=ascending]').count()).toBe(1)
    await head.click()
    expect(await page.locator('#targets th[aria-sort=descending]').count()).toBe(1)
  })

  it('filters by words, quality and what to observe again, and says how many are left', async () => {
    await page.fill('#filter', 'white dwarf')
    expect((await names()).length).toBe(4) // madeNight: targets 5, 16, 27 and 38 of 40
    expect(await page.textContent('#shown')).toBe('4 of 40 targets shown')
    await page.fill('#filter', '')
    await page.selectOption('#quality', 'doubtful')
    expect((await names()).length).toBeGreaterThan(0)
    await page.selectOption('#quality', '')
    await page.check('#again')
    expect((await names()).length).toBeLessThan(40)
    await page.uncheck('#again')
    expect((await names()).length).toBe(40)
  })

  it('needs no mouse: rows by arrow keys, zoom and features by keys', async () => {
    await page.locator('#targets tbody button').first().focus()
    await page.keyboard.press('Enter')
    const first = await page.textContent('#name')
    await page.keyboard.press('ArrowDown')
    expect(await page.textContent('#name')).not.toBe(first)
    expect(await page.locator('tr[aria-current=true]').count()).toBe(1)
    await page.focus('#plot')
    await page.keyboard.press('0')
    const span = async (): Promise<number> => {
      const [from, to] = ((await page.textContent('#range')) ?? '').match(/\d+/g)?.map(Number) ?? []
      return to - from
    }
    const whole = await span()
    await page.keyboard.press('+')
    expect(await span()).toBeLessThan(whole * 0.7)
    const before = await page.textContent('#range')
    await page.keyboard.press('ArrowRight')
    expect(await page.textContent('#range')).not.toBe(before)
    await page.keyboard.press('n')
    expect(await span()).toBe(120)
    await page.keyboard.press('Home')
    expect(await span()).toBe(whole)
  })

  it('draws the spectrum, and zooms into a range that is dragged over', async () => {
    const inked = (): Promise<number> =>
      page.evaluate(
        `(() => { const c = document.getElementById('plot'); const d = c.getContext('2d').getImageData(60, 45, c.width - 80, c.height - 90).data; let n = 0; for (let i = 0; i < d.length; i += 4) if (d[i] < 90) n++; return n })()`,
      )
    expect(await inked()).toBeGreaterThan(500)
    const box = await page.locator('#plot').boundingBox()
    if (!box) throw new Error('the spectrum requires a place on the page, got none')
    await page.mouse.move(box.x + box.width * 0.3, box.y + 100)
    await page.mouse.down()
    await page.mouse.move(box.x + box.width * 0.5, box.y + 120, { steps: 4 })
    await page.mouse.up()
    expect(await page.getAttribute('#plot', 'aria-label')).toMatch(/^Normalised spectrum of Made \d+, \d+ to \d+ Å$/)
    expect(await page.textContent('#range')).not.toContain('3750')
  })

  // WCAG 2.1 success criteria, each by its number; what a rule cannot see (sense of the words) it cannot check.
  it('is accessible by rule: names, labels, headings, landmarks, tables, language, contrast', async () => {
    const faults = (await page.evaluate(ACCESSIBILITY)) as string[]
    expect(faults).toEqual([])
  })
})

const ACCESSIBILITY = `(() => {
  const faults = []
  const shown = (e) => e.getClientRects().length > 0
  const label = (e) => (e.getAttribute('aria-label') || e.textContent || '').trim() || [...(e.labels || [])].map((l) => l.textContent).join('').trim()
  if (!document.documentElement.lang) faults.push('3.1.1 language')
  if (!document.title) faults.push('2.4.2 title')
  for (const e of document.querySelectorAll('button, a, input, select, canvas, [role=region]')) if (!label(e)) faults.push('4.1.2 name: ' + e.outerHTML.slice(0, 80))
  for (const e of document.querySelectorAll('[id]')) if (document.querySelectorAll('#' + CSS.escape(e.id)).length > 1) faults.push('4.1.1 id ' + e.id)
  for (const a of ['aria-labelledby', 'aria-describedby', 'for']) for (const e of document.querySelectorAll('[' + a + ']')) for (const id of e.getAttribute(a).split(' ')) if (!document.getElementById(id)) faults.push('1.3.1 ' + a + ' ' + id)
  let level = 0
  for (const h of document.querySelectorAll('h1, h2, h3')) { const n = Number(h.tagName[1]); if (n > level + 1) faults.push('1.3.1 heading ' + h.textContent); level = n }
  if (document.querySelectorAll('h1').length !== 1) faults.push('1.3.1 one h1')
  if (document.querySelectorAll('main').length !== 1) faults.push('1.3.1 one main')
  for (const t of document.querySelectorAll('table')) if ([...t.querySelectorAll('th')].some((h) => !h.scope)) faults.push('1.3.1 scope of a heading cell')
  for (const e of document.querySelectorAll('.scroll, .half')) if (e.tabIndex < 0) faults.push('2.1.1 scrolling by keyboard')
  const numbers = (c) => (c.match(/[\\d.]+/g) || []).map(Number)
  const light = (c) => { const [r, g, b] = numbers(c).slice(0, 3).map((v) => { const s = v / 255; return s <= 0.04045 ? s / 12.92 : ((s + 0.055) / 1.055) ** 2.4 }); return 0.2126 * r + 0.7152 * g + 0.0722 * b }
  const ground = (e) => { for (let at = e; at; at = at.parentElement) { const c = getComputedStyle(at).backgroundColor; const n = numbers(c); if (n.length < 4 || n[3] > 0) return c } return 'rgb(255,255,255)' }
  for (const e of document.querySelectorAll('body *')) {
    const own = [...e.childNodes].some((n) => n.nodeType === 3 && n.textContent.trim())
    if (!own || !shown(e) || ['SCRIPT', 'STYLE'].includes(e.tagName)) continue
    const [a, b] = [light(getComputedStyle(e).color), light(ground(e))]
    const ratio = (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05)
    if (ratio < 4.5) faults.push('1.4.3 contrast ' + ratio.toFixed(1) + ': ' + e.outerHTML.slice(0, 80))
  }
  return faults
})()`
