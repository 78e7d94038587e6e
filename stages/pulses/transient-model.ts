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
 * What the thermometer reads at the planned times. Each step is the exact solution of the linear system with the
 * coefficients of its own midpoint, so a boundary time of a millisecond costs no more than one of a minute, and the
 * error is of third order in the change of the coefficients over a step.
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

/** ∫G dT from liquid to body, for G = g·(T/T_ref)^p; Kapitza's law for p = 3. */
function boundaryHeat_W(
  { reference_K, boundary_W_per_K, shape }: TransientCell,
  body_K: number,
  liquid_K: number,
) {
  const p = shape.boundaryPower + 1;
  // The two differ by little of themselves: their ratio's logarithm keeps the digits.
  const ratio = Math.log1p((body_K - liquid_K) / liquid_K);
  const atLiquid = boundary_W_per_K * reference_K * Math.exp(p * Math.log(liquid_K / reference_K));
  return atLiquid * (Math.abs(p) < 1e-9 ? ratio : Math.expm1(p * ratio) / p);
}

class Stepper {
  body_K: number;
  liquid_K: number;
  sensor_K: number;
  readonly #cell: TransientCell;
  /** Modes of the last advance: body change = Σ rate·(e^{μt} − 1)/μ. */
  #slow = 0;
  #fast = 0;
  #slowRate = 0;
  #fastRate = 0;

  constructor(cell: TransientCell, start: TransientStart) {
    this.#cell = cell;
    this.body_K = start.body_K;
    this.liquid_K = start.liquid_K;
    this.sensor_K = start.sensor_K;
  }

  step(t: number, h: number, power_W: number, stage_K: number): void {
    const { body_K, liquid_K } = this;
    const cell = this.#cell;
    const link = linkPotential_W(cell, body_K) - (Number.isNaN(stage_K) ? 0 : linkPotential_W(cell, stage_K));
    const heat = power_W + cell.leak_W + cell.leakRamp_W_per_s * (t + h / 2) - link;
    this.#advance(h / 2, heat, body_K, liquid_K);
    const middleBody = this.body_K;
    const middleLiquid = this.liquid_K;
    this.body_K = body_K;
    this.liquid_K = liquid_K;
    this.#advance(h, heat, middleBody, middleLiquid);
    if (cell.lag_s > 0) this.#read(h, body_K);
    else this.sensor_K = this.body_K;
  }

  /** Exact over `h` with the coefficients of the temperatures (atBody, atLiquid). */
  #advance(h: number, heat_W: number, atBody: number, atLiquid: number): void {
    const { reference_K, shape, link_W_per_K, boundary_W_per_K, body_J_per_K, liquid_J_per_K } = this.#cell;
    const lnBody = Math.log(atBody / reference_K);
    const K = link_W_per_K * Math.exp(shape.linkPower * lnBody);
    const Cb = body_J_per_K * Math.exp(lnBody * (shape.bodyPower + (shape.bodyBend * lnBody) / 2));
    if (liquid_J_per_K === 0) {
      this.#slow = -K / Cb;
      this.#fast = 0;
      this.#slowRate = heat_W / Cb;
      this.#fastRate = 0;
      this.body_K += h * phi1(this.#slow * h) * this.#slowRate;
      this.liquid_K = this.body_K;
      return;
    }
    const lnLiquid = Math.log(atLiquid / reference_K);
    const atBoundary = boundary_W_per_K * Math.exp(shape.boundaryPower * lnBody);
    const G = boundary_W_per_K * Math.exp(shape.boundaryPower * lnLiquid);
    const Cl = liquid_J_per_K * Math.exp(lnLiquid * (shape.liquidPower + (shape.liquidBend * lnLiquid) / 2));
    // Rates of change now; the linear system acts on the change from here, so nothing large cancels.
    const exchange = boundaryHeat_W(this.#cell, this.body_K, this.liquid_K);
    const rateBody = (heat_W - exchange) / Cb;
    const rateLiquid = exchange / Cl;
    const a = -(K + atBoundary) / Cb;
    const b = G / Cb;
    const c = atBoundary / Cl;
    const d = -G / Cl;
    const root = Math.sqrt((a - d) ** 2 + 4 * b * c);
    const fast = (a + d - root) / 2;
    const slow = (K * G) / (Cb * Cl) / fast;
    // Change over h = h·φ₁(Ah)·rate, φ₁(z) = (eᶻ − 1)/z, by Sylvester's formula on the two eigenvalues.
    const f1 = phi1(slow * h);
    const f2 = phi1(fast * h);
    const alongBody = (a * rateBody + b * rateLiquid - fast * rateBody) / (slow - fast);
    const alongLiquid = (c * rateBody + d * rateLiquid - fast * rateLiquid) / (slow - fast);
    this.#slow = slow;
    this.#fast = fast;
    this.#slowRate = alongBody;
    this.#fastRate = rateBody - alongBody;
    this.body_K += h * (f1 * alongBody + f2 * (rateBody - alongBody));
    this.liquid_K += h * (f1 * alongLiquid + f2 * (rateLiquid - alongLiquid));
  }

  /** The sensor follows the two modes of the body's last step; exact. */
  #read(h: number, bodyBefore_K: number): void {
    const { lag_s } = this.#cell;
    const decay = Math.exp(-h / lag_s);
    this.sensor_K =
      bodyBefore_K +
      (this.sensor_K - bodyBefore_K) * decay +
      this.#slowRate * lagged(this.#slow, h, lag_s, decay) +
      this.#fastRate * lagged(this.#fast, h, lag_s, decay);
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
