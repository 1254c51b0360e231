/** The report's style: one column, ink and paper for both lights and for print, no outside fonts, nothing that moves. */
export const reportStyle = `
:root { color-scheme: light dark; --paper: #fcfbf8; --ink: #1e2226; --soft: #565d63; --rule: #d8d6cf; --accent: #0a4f9e; --wash: #eef2f7; }
@media screen and (prefers-color-scheme: dark) {
  :root { --paper: #15181c; --ink: #e8e8e4; --soft: #a9b0b6; --rule: #383e45; --accent: #7db7ff; --wash: #1d252e; }
}
* { box-sizing: border-box; }
html { -webkit-text-size-adjust: 100%; text-size-adjust: 100%; }
body { margin: 0; background: var(--paper); color: var(--ink); font: 1rem/1.55 system-ui, sans-serif; }
header, main, footer { max-width: 67rem; margin-inline: auto; padding-inline: 1rem; }
header { padding-block: 2rem 0.4rem; }
h1, h2 { line-height: 1.2; font-weight: 680; text-wrap: balance; overflow-wrap: anywhere; }
h1 { font-size: clamp(1.05rem, 3.4vw, 1.25rem); color: var(--soft); margin: 0 0 0.7rem; }
h2 { font-size: 1.3rem; margin: 0 0 0.5rem; }
h3 { font-size: 1rem; margin: 1rem 0 0.3rem; }
p, ul { margin: 0.5rem 0; max-width: 46rem; }
ul { padding-left: 1.2rem; } li { margin-block: 0.25rem; }
.answer { font-size: clamp(1.3rem, 4.4vw, 1.85rem); line-height: 1.28; font-weight: 620; margin: 0 0 0.5rem; max-width: 54rem; text-wrap: pretty; }
.certainty { font-size: 1.1rem; max-width: 54rem; margin: 0 0 0.7rem; }
.subject, .aside, footer { color: var(--soft); }
section { border-top: 1px solid var(--rule); padding-block: 1.5rem 1.1rem; }
figure { margin: 0.9rem 0 0.6rem; }
figure .medium, figure .wide { display: none; }
figure svg { width: 100%; }
@media (min-width: 36rem) { figure .medium { display: block; } figure .narrow { display: none; } }
@media (min-width: 58rem) { figure .wide { display: block; } figure .medium { display: none; } }
.scroll { overflow-x: auto; margin: 0.7rem 0; }
.scroll:focus-visible, summary:focus-visible { outline: 3px solid var(--accent); outline-offset: 2px; }
table { border-collapse: collapse; font-size: 0.93rem; font-variant-numeric: tabular-nums; min-width: 100%; }
caption { text-align: left; color: var(--soft); padding-bottom: 0.35rem; }
th, td { text-align: left; vertical-align: top; padding: 0.3rem 0.55rem; border-bottom: 1px solid var(--rule); }
thead th { font-weight: 620; vertical-align: bottom; }
thead th[scope="colgroup"] { border-bottom: 0; padding-bottom: 0; text-align: center; }
tbody th { font-weight: 620; min-width: 9rem; }
.sizes tbody th { min-width: 0; }
.sizes tr > th:first-child:not(.figure) { position: sticky; left: 0; background: var(--paper); }
th.figure, td.figure { text-align: right; white-space: nowrap; }
.sizes th, .sizes td { white-space: nowrap; }
.group { border-left: 1px solid var(--rule); }
td small { display: block; color: var(--soft); font-size: 0.8rem; line-height: 1.3; }
dl { margin: 0.7rem 0; display: grid; gap: 0.2rem; }
dl div { display: grid; grid-template-columns: 7.5rem minmax(0, 1fr); gap: 0.8rem; }
dt { color: var(--soft); } dd { margin: 0; overflow-wrap: anywhere; }
details { margin: 0.8rem 0; }
summary { cursor: pointer; padding: 0.4rem 0; width: fit-content; color: var(--accent); }
footer { border-top: 1px solid var(--rule); padding-block: 1rem 2.5rem; font-size: 0.9rem; }
@media print {
  :root { color-scheme: light; --paper: #fff; --ink: #000; --soft: #444; --rule: #bbb; --wash: #f2f2f2; }
  @page { size: A4; margin: 15mm 14mm; }
  body { font-size: 9.5pt; line-height: 1.4; print-color-adjust: exact; -webkit-print-color-adjust: exact; }
  header, main, footer { max-width: none; padding-inline: 0; }
  header { padding-block: 0 2mm; } footer { font-size: 8.5pt; padding-block: 3mm 0; } .certainty { font-size: 11pt; } .answer { font-size: 15pt; } h1 { font-size: 10.5pt; } h2 { font-size: 12.5pt; break-after: avoid; }
  section { padding-block: 4mm 2mm; } p, ul { max-width: none; orphans: 3; widows: 3; }
  figure, tr, li, dl div { break-inside: avoid; } caption, thead { break-after: avoid; } thead { display: table-header-group; }
  figure .medium { display: block; } figure .narrow, figure .wide { display: none; }
  details::details-content { content-visibility: visible; block-size: auto; } summary { list-style: none; color: inherit; }
  .scroll { overflow: visible; } table { font-size: 8.5pt; } td small { font-size: 7.5pt; } th, td { padding: 1mm 1.4mm; } 
  .many { font-size: 6.6pt; } .many small { font-size: 6pt; } .many th, .many td { padding: 0.6mm 0.7mm; }
}
`;
