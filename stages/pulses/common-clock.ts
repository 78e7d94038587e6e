import { median } from "simple-statistics";
import { bodiesOf, type FirstFit } from "./first-fit.js";
import { type ForwardFit, type ForwardPlan, fitForward, type Prior } from "./forward-fit.js";
import { type Common, planOf } from "./forward-plan.js";
import type { Laws } from "./night-laws.js";
import type { ForwardNight, Prepared } from "./prepared-transient.js";

/** The clearest pulses tell what a night has in common; more of them only cost time. */
const SCOUTS = 4;
/** Trial starts in a sampling interval, and between two of those. */
const TRIALS = 4;
const FINER = 4;
const REACH = 2;
/** A lag counts where it is this many standard uncertainties from none. */
const SIGNIFICANT = 5;

/**
 * What is left between the two clocks, and, where nobody gave it, the lag of the thermometer. Both act alike while the
 * heater is on; only the samples next to its edges tell them apart, so all scouts are asked together.
 */
export function findCommon(night: ForwardNight, first: readonly FirstFit[], laws: Laws): Common {
  const scouts = scoutsOf(first);
  const lag = night.lag_s === null ? lagOf(night, scouts, laws) : { value: night.lag_s, u: 0 };
  // Where each pulse's own edge is uncertain there is nothing common to find.
  if (night.u_start_s > 0)
    return { shift: { value: 0, u: Math.hypot(night.u_clock_s, night.u_start_s) }, lag };
  return { shift: shiftOf(night, scouts, laws, lag), lag };
}

/** Clear pulses, spread over the night's temperatures. */
function scoutsOf(first: readonly FirstFit[]): FirstFit[] {
  const ordinary = median(first.map(clarity));
  const clear = first.filter((each) => clarity(each) >= ordinary / 2).sort((a, b) => a.fit.T_K - b.fit.T_K);
  const count = Math.min(SCOUTS, clear.length);
  return Array.from({ length: count }, (_, k) => clear[Math.floor(((k + 0.5) * clear.length) / count)]!);
}

function clarity({ at: { rise_K, samples } }: FirstFit): number {
  return rise_K / samples.noise_K;
}

/** A lag below half a sampling interval is not told from a shift of the clock, and does no harm. */
function lagOf(night: ForwardNight, scouts: readonly FirstFit[], laws: Laws): Prior {
  const { interval_s } = night;
  const none: Prior = { value: 0, u: 0 };
  const shift: Prior = { value: 0, u: Math.hypot(night.u_clock_s, night.u_start_s) };
  const lags = scouts.map(({ at, fit: before }) => {
    const common = { shift, lag: { value: interval_s, u: Number.POSITIVE_INFINITY } };
    const plan = planOf(night, at, bodiesOf(night), {
      laws,
      common,
      before,
      by: "drift",
    });
    const fit = fitForward(at.samples, plan);
    return { value: fit.lag_s, u: fit.u_lag_s };
  });
  const known = lags.filter(({ value, u }) => value > 0 && u > 0);
  if (known.length < 2 || known.length < lags.length / 2) return none;
  const middle = median(known.map(({ value }) => value));
  const scatter = 1.4826 * median(known.map(({ value }) => Math.abs(value - middle)));
  const u = Math.hypot(scatter, median(known.map((each) => each.u))) / Math.sqrt(known.length);
  return middle > 0.5 * interval_s && middle > SIGNIFICANT * u ? { value: middle, u: 0 } : none;
}

/**
 * The start that serves the scouts best, and how far they differ. The misfit as a function of it has steps where an
 * edge of the pulse crosses a sample, so it is scanned for all scouts together before each is let go its own way.
 */
function shiftOf(night: ForwardNight, scouts: readonly FirstFit[], laws: Laws, lag: Prior): Prior {
  const { interval_s, u_clock_s } = night;
  const last = new Map(scouts.map(({ at, fit }) => [at, fit] as const));
  const fitAt = (at: Prepared, shift: Prior): ForwardFit => {
    const before = last.get(at)!;
    const common = { shift, lag };
    const plan = planOf(night, at, bodiesOf(night), { laws, common, before, by: "drift" });
    const fit = fitForward(at.samples, plan);
    last.set(at, fit);
    return fit;
  };
  const scoreAt = (start: number): number =>
    scouts.reduce((sum, { at }) => sum + fitAt(at, { value: start, u: 0 }).score, (start / u_clock_s) ** 2);
  const coarse_s = interval_s / TRIALS;
  const coarse = scanOf(0, REACH * u_clock_s, coarse_s, scoreAt);
  const best = scanOf(coarse, coarse_s, coarse_s / FINER, scoreAt);
  const own = scouts.map(({ at }) => fitAt(at, { value: best, u: coarse_s / FINER }).shift_s);
  const value = median(own);
  const scatter_s = 1.4826 * median(own.map((each) => Math.abs(each - value)));
  // A reading takes time and a trigger is not sharp: a hundredth of an interval is always left to each pulse.
  return { value, u: Math.hypot(1.5 * scatter_s, interval_s / 100) };
}

/** The lowest of scores at even steps about `middle`. */
function scanOf(middle: number, reach: number, step_s: number, scoreAt: (start: number) => number): number {
  const count = Math.max(1, Math.ceil(reach / step_s - 1e-9));
  const tried = Array.from({ length: 2 * count + 1 }, (_, k) => {
    const at = middle + (k - count) * step_s;
    return { at, score: scoreAt(at) };
  });
  return tried.reduce((a, b) => (b.score < a.score ? b : a)).at;
}

/** The best of many starts for one pulse, its own edge sought within what its log leaves open. */
export function fitAtBestStart(night: ForwardNight, at: Prepared, plan: ForwardPlan): ForwardFit {
  const step_s = Math.max(night.interval_s / 2, night.u_start_s / 6);
  const reach = Math.ceil((REACH * plan.shift.u) / step_s);
  let best: ForwardFit | null = null;
  for (let k = -reach; k <= reach; k++) {
    const fit = fitForward(at.samples, { ...plan, shift: { value: plan.shift.value + k * step_s, u: 0 } });
    if (best === null || fit.score < best.score) best = fit;
  }
  const free = fitForward(at.samples, { ...plan, shift: { value: best!.shift_s, u: plan.shift.u } });
  return free.score < best!.score ? free : best!;
}
