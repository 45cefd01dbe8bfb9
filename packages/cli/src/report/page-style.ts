/** The whole style of the report: quiet, printable, light and dark by the reader's own setting. */
export const pageStyle = `
:root {
  color-scheme: light dark;
  --page: #ffffff; --ink: #1d1d1f; --soft: #5b6068; --line: #d5d8dd; --head: #f3f4f6; --mark: #9a3412;
  --series-1: #0b62a4; --series-2: #c2410c; --series-3: #0f766e; --series-4: #86198f; --series-5: #713f12;
}
@media (prefers-color-scheme: dark) {
  :root {
    --page: #16181c; --ink: #e8e9eb; --soft: #a4aab3; --line: #3a3f47; --head: #22262c; --mark: #fdba74;
    --series-1: #6cb8f5; --series-2: #fb923c; --series-3: #5eead4; --series-4: #e8a0f0; --series-5: #e4c48a;
  }
}
* { box-sizing: border-box; }
body { margin: 0 auto; padding: 2rem 1.25rem 3rem; max-width: 62rem; background: var(--page); color: var(--ink);
  font: 15px/1.45 system-ui, 'Helvetica Neue', Arial, sans-serif; }
h1 { font-size: 1.7rem; line-height: 1.2; margin: 0 0 .3rem; overflow-wrap: anywhere; }
h2 { font-size: 1.15rem; margin: 2.2rem 0 .6rem; padding-bottom: .25rem; border-bottom: 1px solid var(--line); }
h3 { font-size: 1rem; margin: 1.4rem 0 .3rem; }
p { margin: .3rem 0; }
a { color: inherit; }
.stamp, .caption, .note { color: var(--soft); }
.stamp { font-size: .85rem; overflow-wrap: anywhere; }
.caption { font-size: .87rem; }
figcaption { margin-top: .3rem; }
.note { white-space: nowrap; }
table { border-collapse: collapse; font-variant-numeric: tabular-nums; }
.wide { overflow-x: auto; }
table.rows { width: 100%; }
table.rows + .wide, .caption + table.rows { margin-top: 1rem; }
table.rows th { width: 13rem; text-align: left; font-weight: 500; color: var(--soft); }
table.rows th, table.rows td { padding: .2rem .8rem .2rem 0; border-bottom: 1px solid var(--line); vertical-align: top; }
table.columns { margin: .3rem 0; }
table.columns th, table.columns td { padding: .2rem .7rem; text-align: right; border-bottom: 1px solid var(--line); }
table.columns thead th { background: var(--head); font-weight: 600; vertical-align: bottom; }
table.columns .unit { display: block; font-weight: 400; color: var(--soft); }
figure { margin: 1rem 0 1.6rem; }
figure svg { display: block; max-width: 100%; height: auto; }
figure.field svg { border: 1px solid var(--line); border-radius: 4px; }
.legend { display: flex; flex-wrap: wrap; gap: .3rem 1.4rem; font-size: .87rem; margin: .2rem 0; padding: 0; list-style: none; }
.legend svg { display: inline-block; vertical-align: middle; margin-right: .4rem; }
.remarks li { margin: .3rem 0; overflow-wrap: anywhere; }
.cautions { border-left: 4px solid var(--mark); padding: .2rem 0 .2rem .4rem; }
@media print {
  :root { color-scheme: light; --page: #ffffff; --ink: #000000; --soft: #444444; --line: #bbbbbb; --head: #eeeeee; --mark: #9a3412;
    --series-1: #0b62a4; --series-2: #c2410c; --series-3: #0f766e; --series-4: #86198f; --series-5: #713f12; }
  body { max-width: none; padding: 0; font-size: 10pt; }
  figure, table, li { break-inside: avoid; }
  h2, h3 { break-after: avoid; }
  figure.field svg { max-height: 22cm; }
}
`;
