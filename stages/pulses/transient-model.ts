/**
 * A heated body, on which heater and thermometer sit, and a liquid behind a boundary; the body hangs from a stage by
 * a weak link. Conductances and heat capacities are power laws about a reference temperature, so that they may
 * change within one transient.
 *
 *   C_b dT_b/dt = P(t) + q + r·t − ∫K dT (T_s to T_b) − ∫G dT (T_l to T_b)
 *   C_l dT_l/dt = ∫G dT (T_l to T_b)
 *   dT_th/dt = (T_b − T_th)/lag
 */
export interface TransientCell {
  /** Where the parameters hold. */
  readonly reference_K: number;
  readonly body_J_per_K: number;
  /** 0: one body. */
  readonly liquid_J_per_K: number;
  /** Weak link body–stage. */
  readonly link_W_per_K: number;
  readonly boundary_W_per_K: number;
  /** Heat into the body that does not depend on its temperature, at time 0. */
  readonly leak_W: number;
  readonly leakRamp_W_per_s: number;
  /** First-order lag of the thermometer behind the body; 0 for none. */
  readonly lag_s: number;
  readonly shape: CellShape;
}

/** d ln(·)/d ln T at the reference, and for body and liquid the second derivative too. */
export interface CellShape {
  readonly bodyPower: number;
  readonly bodyBend: number;
  readonly liquidPower: number;
  readonly liquidBend: number;
  readonly linkPower: number;
  readonly boundaryPower: number;
}

export interface TransientPlan {
  /** Times at which the thermometer is read, increasing; the first is the start. Length n. */
  readonly time_s: Float64Array;
  /** Mean stage temperature between a time and the next, length n; null: the link's far end is taken into the leak. */
  readonly stage_K: Float64Array | null;
  readonly heater: { readonly from_s: number; readonly to_s: number; readonly power_W: number };
  /** Longest step of the integration while the heater is on, and shortly after. */
  readonly fineStep_s: number;
}

export interface TransientStart {
  readonly body_K: number;
  readonly liquid_K: number;
  readonly sensor_K: number;
}

/**
 * What the thermometer reads at the planned times. Each step is the exact solution of the system linearised where the
 * step begins (exponential Rosenbrock–Euler method, of second order: Hochbruck and Ostermann, Acta Numerica 19, 209
 * (2010)), so a boundary time of a millisecond costs no more than one of a minute, and constant coefficients no error.
 * (One body: Bachmann et al., Rev. Sci. Instrum. 43, 205 (1972); two: Shepherd, Rev. Sci. Instrum. 56, 273 (1985).)
 * @param out length n, K
 * @returns body and liquid at the last time
 */
export function sensorTransient(
  cell: TransientCell,
  start: TransientStart,
  plan: TransientPlan,
  out: Float64Array,
): { readonly body_K: number; readonly liquid_K: number } {
  const { time_s, stage_K, heater, fineStep_s } = plan;
  const stepper = new Stepper(cell, start);
  const fineTo_s = heater.to_s + 8 * fineStep_s;
  out[0] = start.sensor_K;
  for (let i = 1; i < time_s.length; i++) {
    let t = time_s[i - 1]!;
    const end = time_s[i]!;
    const stage = stage_K === null ? Number.NaN : stage_K[i - 1]!;
    while (t < end) {
      // The heater's edges fall between samples: a step never crosses one.
      let next = end;
      if (t < heater.from_s && next > heater.from_s) next = heater.from_s;
      const on = t >= heater.from_s && t < heater.to_s;
      if (on && next > heater.to_s) next = heater.to_s;
      if (t >= heater.from_s && t < fineTo_s && next - t > fineStep_s) next = t + fineStep_s;
      if (!(next > t)) break;
      stepper.step(t, next - t, on ? heater.power_W : 0, stage);
      t = next;
    }
    out[i] = stepper.sensor_K;
  }
  return stepper;
}

/** How much the liquid is warmer than the body when nothing has happened for long: it lags by the drift's own heat. */
export function restingLead_K(cell: TransientCell, drift_K_per_s: number): number {
  return cell.liquid_J_per_K === 0 ? 0 : (-cell.liquid_J_per_K * drift_K_per_s) / cell.boundary_W_per_K;
}

/** ∫K dT from T to the reference, for K = k·(T/T_ref)^p. */
export function linkPotential_W(cell: TransientCell, T_K: number): number {
  const { reference_K, link_W_per_K, shape } = cell;
  const p = shape.linkPower + 1;
  const x = Math.log(T_K / reference_K);
  return link_W_per_K * reference_K * (Math.abs(p) < 1e-9 ? x : Math.expm1(p * x) / p);
}

class Stepper {
  body_K: number;
  liquid_K: number;
  sensor_K: number;
  readonly #cell: TransientCell;
  #stage_K = Number.NaN;
  #stagePotential_W = 0;

  constructor(cell: TransientCell, start: TransientStart) {
    this.#cell = cell;
    this.body_K = start.body_K;
    this.liquid_K = start.liquid_K;
    this.sensor_K = start.sensor_K;
  }

  /** Over h from t, with the heater at one power and the stage at one temperature; NaN: no stage. */
  step(t: number, h: number, power_W: number, stage_K: number): void {
    const cell = this.#cell;
    const { reference_K, shape, link_W_per_K, lag_s } = cell;
    if (stage_K !== this.#stage_K && !Number.isNaN(stage_K)) {
      this.#stage_K = stage_K;
      this.#stagePotential_W = linkPotential_W(cell, stage_K);
    }
    const lnBody = Math.log(this.body_K / reference_K);
    const K = link_W_per_K * Math.exp(shape.linkPower * lnBody);
    const bodyPower = shape.bodyPower + shape.bodyBend * lnBody;
    const Cb = cell.body_J_per_K * Math.exp(lnBody * (shape.bodyPower + (shape.bodyBend * lnBody) / 2));
    const p = shape.linkPower + 1;
    // ∫K dT from the reference: K·T is at hand, so no power need be taken again.
    const potential =
      Math.abs(p) < 1e-9
        ? link_W_per_K * reference_K * lnBody
        : (K * this.body_K - link_W_per_K * reference_K) / p;
    const heat =
      power_W + cell.leak_W + cell.leakRamp_W_per_s * (t + h / 2) - potential + this.#stagePotential_W;
    const body_K = this.body_K;
    if (cell.liquid_J_per_K === 0) {
      const rate = heat / Cb;
      const slow = -K / Cb - (rate * bodyPower) / body_K;
      this.body_K += h * phi1(slow * h) * rate;
      this.liquid_K = this.body_K;
      this.#read(h, body_K, lag_s, slow, rate, 0, 0);
      return;
    }
    const liquid_K = this.liquid_K;
    const lnLiquid = Math.log(liquid_K / reference_K);
    const liquidPower = shape.liquidPower + shape.liquidBend * lnLiquid;
    const Cl =
      cell.liquid_J_per_K * Math.exp(lnLiquid * (shape.liquidPower + (shape.liquidBend * lnLiquid) / 2));
    const G = cell.boundary_W_per_K * Math.exp(shape.boundaryPower * lnLiquid);
    const ratio = lnBody - lnLiquid;
    const atBody = G * Math.exp(shape.boundaryPower * ratio);
    const g = shape.boundaryPower + 1;
    // ∫G dT from liquid to body; Kapitza's law for G ∝ T³.
    const exchange = G * liquid_K * (Math.abs(g) < 1e-9 ? ratio : Math.expm1(g * ratio) / g);
    const rateBody = (heat - exchange) / Cb;
    const rateLiquid = exchange / Cl;
    // The Jacobian: conductances, and heat capacities that change with their own temperature.
    const openBody = -(K + atBody) / Cb;
    const openLiquid = -G / Cl;
    const bendBody = (-rateBody * bodyPower) / body_K;
    const bendLiquid = (-rateLiquid * liquidPower) / liquid_K;
    const a = openBody + bendBody;
    const d = openLiquid + bendLiquid;
    const b = G / Cb;
    const c = atBody / Cl;
    const root = Math.sqrt((a - d) ** 2 + 4 * b * c);
    const fast = (a + d - root) / 2;
    // The determinant without the cancellation of openBody·openLiquid against b·c.
    const slow =
      ((K * G) / (Cb * Cl) + openBody * bendLiquid + openLiquid * bendBody + bendBody * bendLiquid) / fast;
    // Change over h = h·φ₁(Jh)·rate, φ₁(z) = (eᶻ − 1)/z, by Sylvester's formula on the two eigenvalues.
    const f1 = h * phi1(slow * h);
    const f2 = h * phi1(fast * h);
    const apart = slow - fast;
    const alongBody = (a * rateBody + b * rateLiquid - fast * rateBody) / apart;
    const alongLiquid = (c * rateBody + d * rateLiquid - fast * rateLiquid) / apart;
    this.body_K += f1 * alongBody + f2 * (rateBody - alongBody);
    this.liquid_K += f1 * alongLiquid + f2 * (rateLiquid - alongLiquid);
    this.#read(h, body_K, lag_s, slow, alongBody, fast, rateBody - alongBody);
  }

  /** The sensor follows the two modes of the body's last step: body change = Σ rate·(e^{μt} − 1)/μ. Exact. */
  #read(
    h: number,
    body_K: number,
    lag_s: number,
    slow: number,
    slowRate: number,
    fast: number,
    fastRate: number,
  ): void {
    if (lag_s === 0) {
      this.sensor_K = this.body_K;
      return;
    }
    const decay = Math.exp(-h / lag_s);
    this.sensor_K =
      body_K +
      (this.sensor_K - body_K) * decay +
      slowRate * lagged(slow, h, lag_s, decay) +
      (fastRate === 0 ? 0 : fastRate * lagged(fast, h, lag_s, decay));
  }
}

/** What a first-order lag makes of (e^{μt} − 1)/μ after h, from rest. */
function lagged(mu: number, h: number, lag_s: number, decay: number): number {
  // At μ = −1/lag both rates coincide; a part in a million beside it the formula still holds eight digits.
  const off = 1 + lag_s * mu;
  const d = Math.abs(off) < 1e-6 ? 1e-6 : off;
  // h·φ₁(μh) − lag·(e^{μh} − e^{−h/lag})/(1 + lag·μ): nothing cancels as μ → 0.
  return h * phi1(mu * h) - (lag_s * (Math.exp(mu * h) - decay)) / d;
}

function phi1(z: number): number {
  return Math.abs(z) < 1e-8 ? 1 + z / 2 : Math.expm1(z) / z;
}
