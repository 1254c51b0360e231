/** The report's style: one column that grows to two, ink and paper for both lights and for print, no outside fonts. */
export const style = `
:root { color-scheme: light dark; --paper: #fbf8f1; --card: #fffdf8; --ink: #23261f; --soft: #5d6154; --rule: #d9d2c0; --accent: #47662f;
  --chosen: #47662f; --other: #9a8f78; --predicted: #b4531f; --positive: #47662f; --negative: #b4531f; --wash: #eef1e4; }
@media (prefers-color-scheme: dark) {
  :root { --paper: #191b17; --card: #20231d; --ink: #e9e6da; --soft: #aaad9d; --rule: #3b4034; --accent: #a9cb86;
    --chosen: #a9cb86; --other: #8a8672; --predicted: #f0915b; --positive: #6f9a4b; --negative: #c8683a; --wash: #263020; }
}
* { box-sizing: border-box; }
html { -webkit-text-size-adjust: 100%; }
body { margin: 0; background: var(--paper); color: var(--ink); font: 1rem/1.55 system-ui, sans-serif; }
main, header.page, footer { max-width: 68rem; margin-inline: auto; padding-inline: 1rem; }
header.page { padding-block: 2.2rem 0.6rem; }
h1, h2, h3 { font-family: Georgia, "Times New Roman", serif; line-height: 1.2; font-weight: 600; text-wrap: balance; }
h1 { font-size: clamp(1.7rem, 5vw, 2.6rem); margin: 0 0 0.4rem; }
h2 { font-size: clamp(1.35rem, 3.4vw, 1.8rem); margin: 0 0 0.5rem; }
h3 { font-size: 1.08rem; margin: 1.6rem 0 0.5rem; }
p { margin: 0.5rem 0; max-width: 44rem; }
.lead { font-size: 1.1rem; color: var(--soft); }
section { border-top: 1px solid var(--rule); padding-block: 1.8rem 1rem; }
.because { background: var(--wash); border-left: 4px solid var(--accent); padding: 0.7rem 0.9rem; border-radius: 0 6px 6px 0; max-width: 44rem; }
.because small { display: block; color: var(--soft); font-size: 0.88rem; margin-top: 0.2rem; }
.because b, b.chosen { color: var(--accent); }
figure { margin: 1rem 0; }
figcaption { color: var(--soft); font-size: 0.9rem; margin-top: 0.4rem; max-width: 44rem; }
img { display: block; height: auto; max-width: 100%; border-radius: 3px; }
img.crop { max-width: none; }
.short { border-left: 4px solid var(--accent); padding-left: 0.9rem; margin: 1rem 0 1.3rem; }
.short h2 { font-size: 1.2rem; margin: 0; } .short p { margin: 0.15rem 0; }
.overview { position: relative; width: fit-content; max-width: 100%; }
.overview svg { position: absolute; inset: 0; width: 100%; height: 100%; }
.overview rect { fill: none; stroke: #b4531f; stroke-width: 2.5; }
.overview rect.tag { fill: #b4531f; }
.overview text { fill: #fff; font: 700 14px system-ui, sans-serif; text-anchor: middle; }
.pairs { display: grid; grid-template-columns: repeat(auto-fill, minmax(320px, 1fr)); gap: 1.2rem 1rem; }
.pair figure { margin: 0 0 0.5rem; width: 320px; }
.pair figcaption { margin-top: 0.2rem; }
.job { display: grid; gap: 0 2.2rem; grid-template-columns: minmax(0, 1fr); }
.glance { display: grid; gap: 0 2.2rem; grid-template-columns: minmax(0, 1fr); }
.kernel { width: min(100%, 19rem); }
img.map { width: 100%; image-rendering: pixelated; border: 1px solid var(--rule); }
table { border-collapse: collapse; font-size: 0.92rem; font-variant-numeric: tabular-nums; min-width: 100%; }
.title { color: var(--soft); font-size: 0.92rem; margin: 1.1rem 0 0.2rem; }
.scroll { overflow-x: auto; margin: 0 0 0.6rem; }
th, td { text-align: left; padding: 0.34rem 0.7rem 0.34rem 0; border-bottom: 1px solid var(--rule); vertical-align: top; }
thead th { font-weight: 600; color: var(--soft); white-space: nowrap; }
td.figure { text-align: right; white-space: nowrap; }
thead th + th { text-align: right; } td:last-child, thead th:last-child { padding-right: 0.4rem; }
tbody tr > :first-child, thead tr > :first-child { padding-left: 0.4rem; }
tbody th { font-weight: 600; white-space: nowrap; }
tr:has(b.chosen) { background: var(--wash); }
.refused { margin: 0; padding-left: 1.1rem; max-width: 44rem; font-size: 0.95rem; }
a { color: var(--accent); }
table.taps { table-layout: fixed; width: 100%; border: 1px solid var(--rule); }
table.taps td { text-align: center; vertical-align: middle; height: 3.6rem; padding: 0; border: 1px solid var(--rule); }
.scale { display: grid; grid-template-columns: 1fr 1fr 1fr; font-size: 0.82rem; color: var(--soft); margin-top: 0.4rem; }
.scale div { grid-column: 1 / -1; height: 0.6rem; border: 1px solid var(--rule); }
.scale span:nth-of-type(2) { text-align: center; } .scale span:nth-of-type(3) { text-align: right; }
.scale .grey { background: linear-gradient(90deg, #000, #fff); }
.scale .diverging { background: linear-gradient(90deg, color-mix(in srgb, var(--negative) 62%, var(--paper)), var(--paper), color-mix(in srgb, var(--positive) 62%, var(--paper))); }
.legend { display: flex; flex-wrap: wrap; gap: 0.2rem 1.4rem; padding: 0; margin: 0.6rem 0 0; list-style: none; font-size: 0.92rem; }
.legend li::before { content: ""; display: inline-block; width: 0.8rem; height: 0.8rem; border-radius: 50%; margin-right: 0.45rem; background: var(--key); vertical-align: -0.06rem; }
.legend li.mark::before { width: 0.22rem; height: 1rem; border-radius: 1px; margin-inline: 0.3rem 0.7rem; vertical-align: -0.16rem; }
.chart svg { max-width: 100%; height: auto; overflow: visible; }
.chart.wide { display: none; }
dl { display: grid; grid-template-columns: max-content 1fr; gap: 0.15rem 1.2rem; margin: 0.8rem 0; } dt { color: var(--soft); } dd { margin: 0; overflow-wrap: anywhere; }
footer { border-top: 1px solid var(--rule); padding-block: 1rem 2.5rem; color: var(--soft); font-size: 0.9rem; }
@media (min-width: 50rem) {
  .chart.wide { display: block; } .chart.narrow { display: none; }
  .job { grid-template-columns: minmax(0, 1fr) 19rem; } .job > .kernel { grid-column: 2; grid-row: 1; margin-top: 0.4rem; }
  .glance { grid-template-columns: minmax(0, 35rem) minmax(0, 1fr); }
}
@media print {
  :root { color-scheme: light; --paper: #fff; --card: #fff; --ink: #000; --soft: #444; --rule: #bbb; --accent: #3a5524; --chosen: #3a5524; --other: #8d836d;
    --predicted: #a8480f; --positive: #5c7f42; --negative: #c06a3a; --wash: #f1f3ea; }
  @page { margin: 16mm 14mm; }
  body { font-size: 9.5pt; line-height: 1.4; print-color-adjust: exact; -webkit-print-color-adjust: exact; }
  section { break-inside: auto; } figure, tr, .pair, .because, .chart { break-inside: avoid; } h2, h3, .title { break-after: avoid; }
  .scroll { overflow: visible; } .pairs { grid-template-columns: repeat(3, minmax(0, 1fr)); gap: 3mm; } .pair figure { width: auto; } img.crop { max-width: 100%; }
  h1 { font-size: 20pt; } h2 { font-size: 14pt; } .glance { grid-template-columns: 92mm minmax(0, 1fr); } .short { margin: 0 0 4mm; } section { padding-block: 5mm 2mm; }
  .kernel { width: 40mm; } .job { grid-template-columns: minmax(0, 1fr) 40mm; gap: 0 5mm; } th, td { padding-right: 0.4rem; } .job > .kernel { grid-column: 2; grid-row: 1; } table, .title, .refused, figcaption, dl, .scale, .because small, footer { font-size: 8.5pt; } .chart svg { width: 100%; max-height: 100mm; } table.taps td { height: 11mm; }
  .chart.wide { display: block; } .chart.narrow { display: none; }
}
`;
