import { GAS_CONSTANT } from "../physics/constants.js";
import { secondVirial_m3_per_mol, secondVirialSlope_m3_per_mol_K } from "../physics/virial.js";
import type { Quantity } from "../quantities/types.js";

/** Helium gas measured out at room temperature. All in SI. */
export interface GasHandled {
  readonly pressure: Quantity;
  readonly volume: Quantity;
  readonly temperature: Quantity;
}

/**
 * Amount of gas, n = pV/[RT(1 + Bp/RT)], with the uncertainties of p, V and T carried through, B's with them.
 * @returns mol
 * @throws DomainError where the second virial coefficient is not known
 */
export function amountFromGas({ pressure, volume, temperature }: GasHandled): Quantity {
  const p = pressure.value;
  const T = temperature.value;
  const RT = GAS_CONSTANT.value * T;
  const B = secondVirial_m3_per_mol(T);
  const Z = 1 + (B.value * p) / RT;
  const value = (p * volume.value) / (RT * Z);

  // d ln n for each input; that p and T enter Z as well is why they are not simply relative uncertainties.
  const byPressure = 1 / p - B.value / (RT * Z);
  const byVolume = 1 / volume.value;
  const ZbyT = (p / RT) * (secondVirialSlope_m3_per_mol_K(T) - B.value / T);
  const byTemperature = -1 / T - ZbyT / Z;
  const byVirial = -p / (RT * Z);
  const relative = Math.hypot(
    byPressure * pressure.u,
    byVolume * volume.u,
    byTemperature * temperature.u,
    byVirial * B.u,
  );
  return {
    value,
    u: value * relative,
    text: `from gas: ${pressure.text} in ${volume.text} at ${temperature.text}`,
  };
}
