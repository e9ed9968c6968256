/** Style of night.html; the colours are those of `palette.ts`, told apart by shape, line and word as well. */
export const HTML_STYLE = `
:root { --ink: #1a1a1a; --quiet: #5c5c5c; --rule: #b5b5b5; --wash: #eeeeec; --blue: #00598c; --vermillion: #b34700; color-scheme: light; }
* { box-sizing: border-box; }
body { margin: 0; color: var(--ink); background: #fff; font: 15px/1.45 system-ui, "DejaVu Sans", sans-serif; }
header, main { padding: 0 1.2rem; }
header { border-bottom: 2px solid var(--ink); }
h1 { font-size: 1.5rem; margin: .8rem 0 .1rem; }
h2 { font-size: 1.1rem; margin: 1.1rem 0 .4rem; }
p { margin: .3rem 0; max-width: 75ch; }
.quiet { color: var(--quiet); }
.lead { font-weight: 700; }
a { color: var(--blue); }
.skip { position: absolute; left: -100rem; }
.skip:focus { left: 1rem; top: .5rem; background: #fff; padding: .3rem; }
:focus-visible { outline: 3px solid var(--blue); outline-offset: 2px; }
.panes { display: grid; grid-template-columns: minmax(0, 11fr) minmax(0, 10fr); gap: 1.4rem; align-items: start; }
@media (max-width: 80rem) { .panes { grid-template-columns: 1fr; } .scroll { max-height: 45vh !important; } }
.detail { position: sticky; top: 0; padding-bottom: 1rem; min-width: 0; }
.controls { display: flex; flex-wrap: wrap; gap: .6rem 1rem; align-items: end; margin: .4rem 0; }
.controls label { display: flex; flex-direction: column; font-size: .85rem; }
.controls .check { flex-direction: row; gap: .4rem; align-items: center; }
input, select, button { font: inherit; color: inherit; }
input, select { padding: .25rem .4rem; border: 1px solid var(--quiet); border-radius: 3px; background: #fff; }
.scroll { max-height: 78vh; overflow: auto; border: 1px solid var(--rule); }
table { border-collapse: collapse; width: 100%; font-size: .88rem; font-variant-numeric: tabular-nums; }
th, td { text-align: left; padding: .18rem .4rem; border-bottom: 1px solid var(--wash); vertical-align: top; }
thead th { position: sticky; top: 0; background: #fff; border-bottom: 2px solid var(--ink); padding: 0; z-index: 1; }
thead button { width: 100%; text-align: left; padding: .3rem .4rem; border: 0; background: none; font-weight: 700; cursor: pointer; white-space: nowrap; }
thead th[aria-sort=ascending] button::after { content: " \\2191"; }
thead th[aria-sort=descending] button::after { content: " \\2193"; }
td { white-space: nowrap; }
td.number { text-align: right; }
.half td { white-space: normal; }
tbody th { font-weight: 400; overflow-wrap: anywhere; min-width: 6rem; }
tbody th button { border: 0; background: none; padding: 0; color: var(--blue); text-decoration: underline; cursor: pointer; text-align: left; font-weight: 600; }
tr[aria-current=true] { background: var(--wash); box-shadow: inset 4px 0 0 var(--ink); }
tr[hidden] { display: none; }
.mark { display: inline-block; width: 1.1em; }
.usable .mark { color: #007a59; } .doubtful .mark { color: #8f6300; } .unusable .mark { color: var(--vermillion); }
.plot { border: 1px solid var(--rule); margin: .4rem 0; }
canvas { display: block; width: 100%; height: 21rem; cursor: crosshair; touch-action: none; }
.tools { display: flex; flex-wrap: wrap; gap: .35rem; align-items: center; }
.tools button { border: 1px solid var(--quiet); border-radius: 3px; background: #fff; padding: .12rem .55rem; cursor: pointer; }
.tools button:hover, thead button:hover { background: var(--wash); }
#reason { border-left: 4px solid var(--vermillion); padding-left: .6rem; }
.brief { max-width: 75rem; } .brief thead th { position: static; padding: .18rem .4rem; } .brief td:last-child { white-space: normal; }
.jump { border: 0; background: none; padding: 0; color: var(--blue); text-decoration: underline; cursor: pointer; font-weight: 600; }
header ul { margin: .2rem 0 .8rem; padding-left: 1.2rem; }
.half { max-height: 15rem; overflow: auto; }
.half thead th { padding: .2rem .5rem; }
`
