import { expect, test } from "vitest";
import { latentHeat_J_per_mol } from "../../../stages/physics/latent-heat.js";
import { saturation } from "../../../stages/physics/saturation.js";
import { compressibility_per_Pa, firstSound_m_per_s } from "../../../stages/physics/sound.js";
import { expectRelative } from "../../expect-relative.js";
import { column, published } from "./published.js";

// The measured rows scatter by 0.1 % and their authors differ by up to 0.4 % below 3.4 K, 1 % towards 4.2 K.
test("the latent heat follows the measured ones", () => {
  const rows = published("helium-4-latent-heat-measured.csv");
  const L = column(rows, "L_J_per_mol");
  column(rows, "T_K").forEach((T, i) => {
    expectRelative([latentHeat_J_per_mol(T)], [L[i]!], T < 3.4 ? 5e-3 : 1.1e-2);
  });
});

// Published latent heat and density, the ITS-90 slope and B: four sources that Clapeyron's equation ties together.
// 0.55 %: below the lambda point the latent heat lies 0.3 to 0.5 % low, at every temperature, whichever form of B.
test("latent heat, vapour pressure, density and virial coefficient satisfy Clapeyron", () => {
  for (let T = 0.7; T <= 3.3; T += 0.05) {
    const state = saturation(T);
    const L = T * state.slope_Pa_per_K * (state.vapourVolume_m3_per_mol - state.liquidVolume_m3_per_mol);
    expectRelative([latentHeat_J_per_mol(T)], [L], 5.5e-3);
  }
});

// Finite differences over 1e-4 K: truncation is (hλ/T)²/24, 1e-6 at 0.5 K where λ = 17.
test("slope and curvature are those of the pressure", () => {
  for (const T of [0.5, 0.9, 1.3, 1.7, 2.1, 3]) {
    const [below, here, above] = [saturation(T - 5e-5), saturation(T), saturation(T + 5e-5)];
    expectRelative([here.slope_Pa_per_K], [(above.pressure_Pa - below.pressure_Pa) / 1e-4], 1e-5);
    expectRelative([here.curvature_Pa_per_K2], [(above.slope_Pa_per_K - below.slope_Pa_per_K) / 1e-4], 1e-5);
    const liquid = (above.liquidVolume_m3_per_mol - below.liquidVolume_m3_per_mol) / 1e-4;
    // 27.6e-6 m³/mol: 1e-11 is 4e-7 of it, the truncation near the lambda point.
    expect(Math.abs(here.liquidVolumeSlope_m3_per_mol_K - liquid)).toBeLessThan(1e-11);
  }
});

// The scale's equation is bent near its lower end a little differently from the ideal gas: 0.1 % and 0.6 %, measured.
test("the saturation line joins at 1.25 K", () => {
  const [below, above] = [saturation(1.25 - 1e-9), saturation(1.25)];
  expectRelative([below.pressure_Pa], [above.pressure_Pa], 2e-4);
  expectRelative([below.slope_Pa_per_K], [above.slope_Pa_per_K], 1.5e-3);
  expectRelative([below.curvature_Pa_per_K2], [above.curvature_Pa_per_K2], 8e-3);
});

test("the latent heat has no step where formula and table meet", () => {
  // The table's last digit, 0.01 J/mol.
  expect(Math.abs(latentHeat_J_per_mol(0.6) - latentHeat_J_per_mol(0.6 - 1e-9))).toBeLessThan(0.011);
});

// Measured to about 0.1 %, adopted database of the same review.
test("first sound follows the measured rows", () => {
  const rows = published("helium-4-first-sound-measured.csv");
  expectRelative(column(rows, "T_K").map(firstSound_m_per_s), column(rows, "u1_m_per_s"), 1e-3);
});

test("the compressibility is 1/ρu²", () => {
  // 145.1397 kg/m³ and 238.21 m/s at T = 0.
  expectRelative([compressibility_per_Pa(0)], [1 / (145.1397 * 238.21 ** 2)], 1e-12);
});

test("ranges are kept", () => {
  expect(() => saturation(0)).toThrow(/saturation/);
  expect(() => saturation(3.4)).toThrow(/saturation/);
  expect(() => latentHeat_J_per_mol(5.2)).toThrow(/latent heat/);
  expect(() => firstSound_m_per_s(4.3)).toThrow(/first sound/);
});
