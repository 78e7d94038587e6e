import { AROUND, SMALL } from "../figures/pulse-picture.js";

/** Per cent of the small picture's width, to which margins and widths on the page refer. */
const ofSmall = (units: number) => `${Number(((100 * units) / SMALL.width).toFixed(3))}%`;

/** The page's whole style: system faces, one accent, light and dark, phone and paper. */
export const STYLE = `
:root {
  color-scheme: light dark;
  --paper: #fbfaf6; --ink: #1c2126; --soft: #5b636b; --rule: #d9d6cc; --plate: #ffffff;
  --accent: #0b3c6f; --alarm: #a8380f; --wash: #f2efe6; --share: #c9d6e4;
  --serif: "Iowan Old Style", "Palatino Linotype", Palatino, "URW Palladio L", P052, "Book Antiqua", Georgia, "DejaVu Serif", serif;
  --sans: "Helvetica Neue", Arial, "Liberation Sans", "DejaVu Sans", sans-serif;
}
@media (prefers-color-scheme: dark) {
  :root {
    --paper: #15181b; --ink: #e6e3da; --soft: #a2a8ad; --rule: #363b40; --plate: #f4f2ec;
    --accent: #8fbbe8; --alarm: #f08a5d; --wash: #1d2125; --share: #2c4560;
  }
}
* { box-sizing: border-box; }
html { -webkit-text-size-adjust: 100%; scroll-behavior: smooth; }
body { margin: 0; background: var(--paper); color: var(--ink); font: 1.0625rem/1.55 var(--serif); }
main, header, footer { max-width: 62rem; margin: 0 auto; padding: 0 1.5rem; }
header { padding-top: 2.25rem; }
h1, h2, h3 { font-weight: 600; line-height: 1.2; text-wrap: balance; }
h1 { font-size: 1.9rem; margin: 0; }
h2 { font-size: 1.4rem; margin: 0 0 1rem; padding-top: .8rem; border-top: 1px solid var(--ink); }
h3 { font-size: 1.08rem; margin: 1.8rem 0 .5rem; }
section { margin-top: 2.8rem; }
p { margin: .6rem 0; max-width: 44rem; }
a { color: var(--accent); }
.under { color: var(--soft); margin: .3rem 0 0; }
nav { font: .85rem/1.9 var(--sans); margin: 1rem 0 0; display: flex; flex-wrap: wrap; gap: 0 1.1rem; }
nav a { text-decoration: none; }
nav a:hover { text-decoration: underline; }
.first { display: grid; grid-template-columns: minmax(15rem, 21rem) minmax(0, 1fr); gap: 2rem; margin-top: 1.6rem; align-items: start; }
.found { margin: 0; }
.found dt { font: .82rem/1.3 var(--sans); color: var(--soft); }
.found dd { margin: .1rem 0 1.15rem; }
.value { font-size: 1.95rem; line-height: 1.15; font-variant-numeric: lining-nums; white-space: nowrap; }
.value small { font-size: .58em; color: var(--soft); }
.beside { display: block; font: .84rem/1.4 var(--sans); color: var(--soft); margin-top: .35rem; }
.beside.apart { color: var(--alarm); }
.verdict { border-left: 3px solid var(--accent); padding: .1rem 0 .1rem .8rem; }
.failed { border: 2px solid var(--alarm); border-radius: 3px; padding: .7rem 1rem .8rem; margin: 1.5rem 0 0; background: var(--wash); }
.failed h2 { border: 0; padding: 0; margin: 0 0 .3rem; font-size: 1.1rem; color: var(--alarm); }
.failed ul { margin: 0; padding-left: 1.1rem; }
figure { margin: 0; }
figure > svg { display: block; width: 100%; height: auto; }
.plate { background: var(--plate); border: 1px solid var(--rule); border-radius: 3px; padding: .4rem; max-width: 44rem; }
.plate > svg { mix-blend-mode: multiply; }
figcaption { font: .84rem/1.45 var(--sans); color: var(--soft); margin-top: .45rem; }
.plate > figcaption { color: #4b5259; padding: 0 .5rem .4rem; margin-top: .2rem; }
.pair { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(22rem, 100%), 1fr)); gap: 1.4rem; }
.scroll { overflow-x: auto; margin: .8rem 0 1.2rem; }
table { border-collapse: collapse; min-width: min(100%, 22rem); font: .87rem/1.4 var(--sans); font-variant-numeric: tabular-nums lining-nums; }
caption { text-align: left; color: var(--soft); padding-bottom: .45rem; }
th, td { padding: .34rem .85rem .34rem 0; text-align: left; vertical-align: top; border-bottom: 1px solid var(--rule); }
thead th { font-weight: 600; border-bottom: 1.5px solid var(--ink); vertical-align: bottom; }
tbody th, tfoot th { min-width: 7rem; }
tbody th { font-weight: 400; }
tfoot th, tfoot td { border-top: 1.5px solid var(--ink); border-bottom: 0; font-weight: 600; }
th:last-child, td:last-child { padding-right: 0; }
.number { text-align: right; white-space: nowrap; }
.chosen th, .chosen td { font-weight: 600; }
.share { display: inline-block; min-width: 5.5rem; padding: 0 .35rem; background: linear-gradient(to left, var(--share) var(--part), transparent var(--part)); }
.wrong { color: var(--alarm); }
.note { background: var(--wash); padding: .7rem 1rem; border-radius: 3px; max-width: 46rem; }
.quiet { list-style: none; padding: 0; margin: 0; min-width: 14rem; }
.quiet li { margin: 0; }
details { border-bottom: 1px solid var(--rule); padding: .5rem 0; }
summary { cursor: pointer; font: .92rem/1.5 var(--sans); }
summary:focus-visible, a:focus-visible { outline: 2px solid var(--accent); outline-offset: 2px; }
.night > p, .night > figure { margin: .8rem 0; }
.pictures { display: grid; grid-template-columns: repeat(auto-fill, minmax(13.5rem, 1fr)); gap: 1.1rem 1.2rem; margin: 1rem 0; }
.pictures figcaption { font-size: .78rem; margin-top: .1rem; }
.pictures > figure:has(> [open]) { grid-column: 1 / -1; max-width: 46rem; }
.pulse { border: 0; padding: 0; }
.pulse > summary { display: block; position: relative; overflow: hidden; cursor: zoom-in; }
.pulse > summary::-webkit-details-marker { display: none; }
.pulse > summary::after { content: "+"; content: "+" / ""; position: absolute; top: 0; right: .1rem; line-height: 1; color: var(--soft); }
.pulse[open] > summary { cursor: zoom-out; }
.pulse[open] > summary::after { content: "−"; content: "−" / ""; }
.pulse svg { display: block; width: 100%; height: auto; }
.pulse:not([open]) svg { width: ${ofSmall(SMALL.width + AROUND.left + AROUND.right)}; max-width: none; margin: ${ofSmall(-AROUND.top)} 0 ${ofSmall(-AROUND.bottom)} ${ofSmall(-AROUND.left)}; }
.pulse:not([open]) .fine { display: none; }
.pulse:not([open]) .coarse { display: inline; }
.pulse:not([open]) .d { stroke-width: 4.5; }
.pulse:not([open]) .r { stroke-width: 3.5; }
.pulse:not([open]) .f { stroke-width: 3; }
.pulse > p { font: .84rem/1.45 var(--sans); color: var(--soft); margin: .3rem 0 -.3rem; }
.pictures > figure:has(> [open]) > figcaption { font-size: .84rem; }
.equation { margin: .7rem 0 .7rem 1.2rem; overflow-x: auto; overflow-y: hidden; padding: .2rem 0; }
math { font-size: 1.08em; width: max-content; margin: 0; }
pre { font: .8rem/1.45 ui-monospace, Menlo, Consolas, "DejaVu Sans Mono", monospace; background: var(--wash); padding: .8rem 1rem; border-radius: 3px; overflow-x: auto; }
code { font: .82em ui-monospace, Menlo, Consolas, "DejaVu Sans Mono", monospace; overflow-wrap: anywhere; }
.cautions li { margin: .35rem 0; max-width: 46rem; }
footer { color: var(--soft); font: .82rem/1.5 var(--sans); margin-top: 3rem; padding-bottom: 2.5rem; }
@media screen and (max-width: 52rem) {
  body { font-size: 1rem; }
  main, header, footer { padding-left: 1rem; padding-right: 1rem; }
  header { padding-top: 1.4rem; }
  h1 { font-size: 1.5rem; }
  .first { grid-template-columns: minmax(0, 1fr); gap: 1rem; }
  .pictures { grid-template-columns: repeat(auto-fill, minmax(9.5rem, 1fr)); gap: .9rem; }
}
@media print {
  :root {
    --paper: #fff; --ink: #000; --soft: #444; --rule: #bbb; --plate: #fff;
    --accent: #000; --alarm: #000; --wash: #fff; --share: #ddd;
  }
  @page { margin: 16mm 14mm; }
  body { font-size: 10.5pt; }
  nav { display: none; }
  .first { grid-template-columns: 13.5rem minmax(0, 1fr); gap: 1.2rem; }
  .value { font-size: 1.5rem; }
  main, header, footer { max-width: none; padding: 0; }
  .plate { border: 0; padding: 0; }
  figure, tr, .note, .failed { break-inside: avoid; }
  h2, h3, caption, summary { break-after: avoid; }
  .scroll, pre { overflow: visible; }
  pre { white-space: pre-wrap; }
  details:not(.pulse)::details-content { content-visibility: visible; block-size: auto; }
  .pictures { grid-template-columns: repeat(3, 1fr); }
  .pulse > summary::after, .pulse[open] > summary::after { content: none; }
}
`;
