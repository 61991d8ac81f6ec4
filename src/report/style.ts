/** Style of the report: light and dark by the reader's setting, from phone to wide screen, and for paper. */
export const STYLE = `
:root {
  color-scheme: light dark;
  --paper: #ffffff; --ground: #f3f5f4; --ink: #1d2427; --faint: #566166; --line: #d3d9d8;
  --accent: #00629b; --clear: #00664b; --compromise: #8a4b00; --inseparable: #a3341a;
}
@media (prefers-color-scheme: dark) {
  :root {
    --paper: #171c1e; --ground: #0f1314; --ink: #e6eaea; --faint: #a5b0b3; --line: #343c3f;
    --accent: #6cbdf0; --clear: #4fc9a1; --compromise: #efb04a; --inseparable: #ff9a7c;
  }
}
* { box-sizing: border-box; }
body {
  margin: 0; background: var(--ground); color: var(--ink);
  overflow-wrap: break-word;
  font: 16px/1.5 system-ui, -apple-system, 'Segoe UI', 'DejaVu Sans', sans-serif;
}
main { max-width: 1184px; margin: 0 auto; padding: 28px 32px 56px; background: var(--paper); }
header p, .faint { color: var(--faint); }
h1 { font-size: 1.5rem; line-height: 1.25; margin: 0 0 4px; }
h2 { font-size: 1.2rem; margin: 48px 0 12px; padding-top: 14px; border-top: 2px solid var(--ink); }
h3 { font-size: 1.02rem; margin: 30px 0 8px; }
p, ul { margin: 8px 0; max-width: 82ch; }
ul { padding-left: 1.2em; }
li { margin: 4px 0; }
a { color: var(--accent); }
code { font: 0.88em ui-monospace, 'DejaVu Sans Mono', monospace; overflow-wrap: anywhere; }
.verdict {
  display: grid; grid-template-columns: 200px minmax(0, 1fr); gap: 4px 28px;
  padding: 18px 0; border-top: 1px solid var(--line);
}
.verdict h3 { margin: 0; grid-column: 1 / -1; }
.corner { font-size: 2.3rem; line-height: 1.1; font-weight: 650; font-variant-numeric: tabular-nums; white-space: nowrap; }
.corner small { display: block; font-size: 0.85rem; line-height: 1.5; font-weight: 400; color: var(--faint); white-space: normal; }
.badge {
  display: inline-block; padding: 0 8px; margin-left: 8px; border: 1.5px solid currentColor; border-radius: 3px;
  font-size: 0.8rem; font-weight: 650; vertical-align: 2px;
}
.badge.clear { color: var(--clear); }
.badge.compromise { color: var(--compromise); border-style: dashed; }
.badge.inseparable { color: var(--inseparable); border-style: double; border-width: 3px; }
.verdict p { margin-top: 0; }
.corner.inseparable { font-weight: 400; color: var(--faint); }
.reasons { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(100%, 460px), 1fr)); gap: 0 40px; }
.reasons h3 { margin-top: 14px; }
.figures { display: flex; flex-wrap: wrap; gap: 6px 28px; margin: 10px 0 4px; padding: 0; }
.figures div { min-width: 108px; }
.figures dt { color: var(--faint); font-size: 0.85rem; }
.figures dd { margin: 0; font-weight: 600; font-variant-numeric: tabular-nums; }
figure { margin: 14px 0; }
figure img { display: block; width: 100%; height: auto; border: 1px solid #d3d9d8; }
@media screen and (prefers-color-scheme: dark) { figure img { filter: invert(0.91) hue-rotate(180deg); } }
figcaption { color: var(--faint); font-size: 0.9rem; margin-top: 4px; max-width: 92ch; }
.pair { display: grid; grid-template-columns: 1fr 1fr; gap: 0 16px; }
.scroll { overflow-x: auto; }
section > .scroll + .scroll { margin-top: 36px; }
.scroll:focus-visible { outline: 2px solid var(--accent); }
table { border-collapse: collapse; width: 100%; font-size: 0.92rem; font-variant-numeric: tabular-nums; }
caption { text-align: left; color: var(--faint); padding: 4px 0 8px; }
/* Keeps to the window while the table scrolls under it. */
caption span { display: inline-block; position: sticky; left: 0; max-width: min(100ch, calc(100vw - 34px)); }
th, td { padding: 5px 14px 5px 0; text-align: right; border-bottom: 1px solid var(--line); vertical-align: top; white-space: nowrap; }
th:first-child, td.text { text-align: left; }
td.text, th.text { text-align: left; }
td.text { white-space: normal; min-width: 22ch; }
.wide img { min-width: 900px; }
thead th { color: var(--faint); font-weight: 600; border-bottom-color: var(--ink); vertical-align: bottom; white-space: normal; line-height: 1.25; }
tr > th:first-child { position: sticky; left: 0; background: var(--paper); }
tbody th { font-weight: 500; }
tr.chosen > th, tr.chosen td { font-weight: 700; background: color-mix(in srgb, var(--accent) 12%, var(--paper)); }
tr.chosen th::before { content: '▸ '; }
.warning { border-left: 4px solid var(--compromise); padding-left: 12px; }
.sign { display: grid; grid-template-columns: 1fr 1fr; gap: 34px 40px; margin-top: 24px; max-width: 900px; }
.sign div { border-bottom: 1px solid var(--ink); min-height: 2.4em; color: var(--faint); font-size: 0.85rem; }
@media (max-width: 720px) {
  main { padding: 18px 16px 40px; }
  .verdict, .pair, .sign { grid-template-columns: minmax(0, 1fr); }
  h2 { margin-top: 36px; }
}
@media print {
  :root {
    color-scheme: light;
    --paper: #fff; --ground: #fff; --ink: #000; --faint: #444; --line: #bbb;
    --accent: #00496f; --clear: #004d39; --compromise: #6b3a00; --inseparable: #7d2410;
  }
  @page { margin: 16mm 14mm 18mm; @bottom-right { content: counter(page) ' / ' counter(pages); font-size: 9pt; } }
  body { font-size: 10pt; }
  figcaption { font-size: 8.5pt; max-width: none; }
  .figures { gap: 4px 16px; }
  .figures div { min-width: 84px; }
  main { max-width: none; padding: 0; }
  h2, h3, caption { break-after: avoid; }
  figure, .verdict, .reasons div, tr, .sign { break-inside: avoid; }
  h2 { margin-top: 28px; }
  thead { display: table-header-group; }
  .scroll { overflow: visible; }
  .wide img { min-width: 0; }
  caption span { max-width: none; position: static; }
  tr > th:first-child { position: static; }
  table { font-size: 8.5pt; }
  th, td { padding-right: 8px; }
}
`;
