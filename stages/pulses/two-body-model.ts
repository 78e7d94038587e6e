/**
 * A heated body, on which heater and thermometer sit, and a liquid behind a boundary; the body hangs from a stage by
 * a weak link. Conductances and heat capacities are power laws about a reference temperature, so that they may
 * change within one transient.
 *
 *   C_b dT_b/dt = P(t) + q − K·(T_b − T_s) − G·(T_b − T_l)
 *   C_l dT_l/dt = G·(T_b − T_l)
 */
export interface TwoBodyCell {
  /** Where the parameters hold. */
  readonly reference_K: number;
  readonly body_J_per_K: number;
  readonly liquid_J_per_K: number;
  /** Weak link body–stage; heat flows as the integral of K from T_s to T_b. */
  readonly link_W_per_K: number;
  readonly boundary_W_per_K: number;
  /** Constant heat leak into the body. */
  readonly leak_W: number;
  readonly shape: CellShape;
}

/** d ln(·)/d ln T at the reference, and for the liquid the second derivative too. */
export interface CellShape {
  readonly bodyPower: number;
  readonly liquidPower: number;
  readonly liquidBend: number;
  readonly linkPower: number;
  readonly boundaryPower: number;
}

export interface TransientPlan {
  /** Times at which the body's temperature is wanted, increasing; the first is the start. Length n. */
  readonly time_s: Float64Array;
  /** Stage temperature half way between a time and the next. Length n. */
  readonly stage_K: Float64Array;
  readonly heater: { readonly from_s: number; readonly to_s: number; readonly power_W: number };
  /** Longest step of the integration while the heater is on, and shortly after. */
  readonly fineStep_s: number;
}

/**
 * Body temperature at the planned times. Each step is the exact solution of the linear system with the coefficients
 * of its own midpoint, so a boundary time of a millisecond costs no more than one of a minute, and the error is of
 * third order in the change of the coefficients over a step.
 * (Exact two-body response: Shepherd, Rev. Sci. Instrum. 56, 273 (1985).)
 * @returns length n, K
 */
export function bodyTransient(
  cell: TwoBodyCell,
  start: { body_K: number; liquid_K: number },
  plan: TransientPlan,
): Float64Array {
  const { time_s, stage_K, heater } = plan;
  const out = new Float64Array(time_s.length);
  const stepper = new Stepper(cell, start.body_K, start.liquid_K);
  out[0] = start.body_K;
  for (let i = 1; i < time_s.length; i++) {
    let t = time_s[i - 1]!;
    const end = time_s[i]!;
    while (t < end) {
      // The heater's edges fall between samples: a step never crosses one.
      let next = end;
      if (t < heater.from_s && next > heater.from_s) next = heater.from_s;
      const on = t >= heater.from_s && t < heater.to_s;
      if (on && next > heater.to_s) next = heater.to_s;
      const near = t >= heater.from_s && t < heater.to_s + 4 * plan.fineStep_s;
      if (near && next - t > plan.fineStep_s) next = t + plan.fineStep_s;
      if (!(next > t)) break;
      stepper.step(next - t, on ? heater.power_W : 0, stage_K[i - 1]!);
      t = next;
    }
    out[i] = stepper.body_K;
  }
  return out;
}

/** Temperatures of body and liquid when nothing has happened for long: the liquid lags by the drift's own heat. */
export function restingLag_K(cell: TwoBodyCell, drift_K_per_s: number): number {
  return (-cell.liquid_J_per_K * drift_K_per_s) / cell.boundary_W_per_K;
}

class Stepper {
  body_K: number;
  liquid_K: number;
  readonly #cell: TwoBodyCell;

  constructor(cell: TwoBodyCell, body_K: number, liquid_K: number) {
    this.#cell = cell;
    this.body_K = body_K;
    this.liquid_K = liquid_K;
  }

  step(h: number, power_W: number, stage_K: number): void {
    const { body_K, liquid_K } = this;
    this.#advance(h / 2, power_W, stage_K, body_K, liquid_K);
    const middleBody = this.body_K;
    const middleLiquid = this.liquid_K;
    this.body_K = body_K;
    this.liquid_K = liquid_K;
    this.#advance(h, power_W, stage_K, middleBody, middleLiquid);
  }

  /** Exact over `h` with the coefficients of the temperatures (atBody, atLiquid). */
  #advance(h: number, power_W: number, stage_K: number, atBody: number, atLiquid: number): void {
    const { reference_K, shape, ...cell } = this.#cell;
    const lnLink = Math.log((atBody + stage_K) / (2 * reference_K));
    const lnBoundary = Math.log((atBody + atLiquid) / (2 * reference_K));
    const lnBody = Math.log(atBody / reference_K);
    const lnLiquid = Math.log(atLiquid / reference_K);
    const K = cell.link_W_per_K * Math.exp(shape.linkPower * lnLink);
    const G = cell.boundary_W_per_K * Math.exp(shape.boundaryPower * lnBoundary);
    const Cb = cell.body_J_per_K * Math.exp(shape.bodyPower * lnBody);
    const Cl =
      cell.liquid_J_per_K * Math.exp(lnLiquid * (shape.liquidPower + (shape.liquidBend * lnLiquid) / 2));
    const heat = power_W + cell.leak_W - K * (this.body_K - stage_K);
    // Rates of change now; the linear system acts on the change from here, so nothing large cancels.
    const exchange = G * (this.body_K - this.liquid_K);
    const rateBody = (heat - exchange) / Cb;
    const rateLiquid = exchange / Cl;
    const a = -(K + G) / Cb;
    const b = G / Cb;
    const c = G / Cl;
    const trace = a - c;
    const root = Math.sqrt((a + c) ** 2 + 4 * b * c);
    const fast = (trace - root) / 2;
    const slow = (K * G) / (Cb * Cl) / fast;
    // Change over h = h·φ₁(Ah)·rate, φ₁(z) = (eᶻ − 1)/z, by Sylvester's formula on the two eigenvalues.
    const f1 = phi1(slow * h);
    const f2 = phi1(fast * h);
    const weight = (f1 - f2) / (slow - fast);
    const share = f2 - weight * fast;
    this.body_K += h * (share * rateBody + weight * (a * rateBody + b * rateLiquid));
    this.liquid_K += h * (share * rateLiquid + weight * (c * rateBody - c * rateLiquid));
  }
}

function phi1(z: number): number {
  return Math.abs(z) < 1e-8 ? 1 + z / 2 : Math.expm1(z) / z;
}
