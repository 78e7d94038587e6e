import { html, type Markup, trusted } from "../html.js";
import { roundToUncertainty } from "../rounding.js";
import type { CampaignReport } from "../types.js";
import { percent, powerText } from "../words.js";
import { numbers, table, typeset, words } from "./parts.js";

const i = (name: string) => `<mi>${name}</mi>`;
const n = (number: string) => `<mn>${number}</mn>`;
const o = (sign: string) => `<mo>${sign}</mo>`;
const up = (base: string, exponent: string) => `<msup>${base}${exponent}</msup>`;
const down = (base: string, index: string) => `<msub>${base}${index}</msub>`;
const over = (above: string, below: string) => `<mfrac><mrow>${above}</mrow><mrow>${below}</mrow></mfrac>`;
const row = (...parts: readonly string[]) => `<mrow>${parts.join("")}</mrow>`;
const brackets = (...parts: readonly string[]) => row(o("("), ...parts, o(")"));

function equation(label: string, ...parts: readonly string[]): Markup {
  return html`<div class="equation"><math display="block" aria-label="${label}">${trusted(row(...parts))}</math></div>
`;
}

/** Between two equations on one line. */
const GAP = `<mspace width="2em"></mspace>`;
const T = i("T");
const k = i("k");
const hbar = i("ħ");
const u1 = down(i("u"), n("1"));
const gap = i("Δ");
const y = i("y");

const STEP = equation(
  "C equals Q over Delta T",
  i("C"),
  o("="),
  over(i("Q"), row(i("Δ"), T)),
  GAP,
  T,
  o("="),
  over(row(down(T, i("before")), o("+"), down(T, i("after"))), n("2")),
);

const PHONONS = equation(
  "phonon part",
  down(i("C"), i("ph")),
  o("="),
  i("A"),
  up(T, n("3")),
  o("+"),
  i("B"),
  up(T, n("5")),
  o("+"),
  o("…"),
  GAP,
  u1,
  o("="),
  over(k, hbar),
  up(
    brackets(over(row(n("2"), up(i("π"), n("2")), k, down(i("V"), i("m"))), row(n("15"), i("A")))),
    n("1/3"),
  ),
);

const ROTONS = equation(
  "roton part",
  down(i("C"), i("r")),
  o("="),
  i("D"),
  `<msqrt>${T}</msqrt>`,
  up(i("e"), row(o("−"), y)),
  brackets(over(n("3"), n("4")), o("+"), y, o("+"), up(y, n("2"))),
  GAP,
  y,
  o("="),
  over(gap, row(k, T)),
);

const WHOLE = equation(
  "whole curve",
  i("C"),
  o("="),
  over(row(down(i("V"), i("m")), k), row(n("2"), up(i("π"), n("2")))),
  o("∫"),
  over(
    row(up(i("q"), n("2")), up(i("x"), n("2")), up(i("e"), i("x"))),
    up(brackets(up(i("e"), i("x")), o("−"), n("1")), n("2")),
  ),
  i("d"),
  i("q"),
  GAP,
  i("x"),
  o("="),
  over(row(i("ε"), brackets(i("q"))), row(k, T)),
);

const COVARIANCE = equation(
  "covariance",
  i("V"),
  o("="),
  `<mi mathvariant="normal">diag</mi>`,
  brackets(`<msubsup>${i("u")}${i("repeat")}${n("2")}</msubsup>`),
  o("+"),
  `<munder>${o("∑")}${i("s")}</munder>`,
  i("s"),
  up(i("s"), `<mi mathvariant="normal">T</mi>`),
);

/** What was taken off for the empty cell. */
export function addendaSection(report: CampaignReport): Markup {
  const { description, mean_share, coefficients } = report.addenda;
  return html`<section id="addenda"><h2>Addenda</h2>
<p>${description}</p>
<p>Mean share of the total heat capacity: ${percent(mean_share)}. Its uncertainty is common to all points.</p>
${
  coefficients.length === 0
    ? []
    : table(
        "Heat capacity of the empty cell, C = Σ a T^p",
        [words("term"), numbers("coefficient a"), words("unit")],
        coefficients.map(({ power, value, u }) => ({
          cells: [powerText(power), typeset(roundToUncertainty(value, u)), coefficientUnit(power)],
        })),
      )
}</section>
`;
}

/** J/K^{p+1} in words: J/K², J K, J. */
function coefficientUnit(power: number): string {
  const kelvins = power + 1;
  if (kelvins === 0) return "J";
  const raised = (p: number) => (p === 1 ? "K" : powerText(p).replace("T", "K"));
  return kelvins > 0 ? `J/${raised(kelvins)}` : `J ${raised(-kelvins)}`;
}

/** How the numbers were made, with the equations and where they come from. */
export function methodSection(): Markup {
  return html`<section id="method"><h2>Method</h2>
<p>Each heat pulse warms cell and sample by ΔT. The drift before and the curve after are fitted and carried on to the time of the step; heat Q is the integral of voltage times current, with the share of lead heat that flows inwards.</p>
${STEP}<p>The empty cell is taken off, the rest divided by the amount, brought to constant volume and corrected for the finite step. The curve is then a sum of phonons and rotons (Landau 1941, 1947; review: Donnelly and Barenghi, J. Phys. Chem. Ref. Data 27, 1217 (1998)):</p>
${PHONONS}${ROTONS}<p>or the integral over a published excitation curve ε(q) whose phonon part is scaled by u₁ and whose roton part is shifted to Δ (Godfrin et al., Phys. Rev. B 103, 104516 (2021)):</p>
${WHOLE}<p>The fit is linear in all amplitudes and non-linear in Δ alone: variable projection (Golub and Pereyra, SIAM J. Numer. Anal. 10, 413 (1973)). It is weighted with the whole covariance of the points (JCGM 100:2008), one column s a source that moves all points together:</p>
${COVARIANCE}</section>
`;
}
