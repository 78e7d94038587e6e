import type { Estimate, Separation } from "../separate/types.js";

/** JSON has no NaN: what is no number is null. */
function finite(x: number): number | null {
  return Number.isFinite(x) ? x : null;
}

function estimate(of: Estimate | null) {
  if (of === null) return null;
  return {
    value: finite(of.value),
    standard_uncertainty: finite(of.standard_uncertainty),
    unit: of.unit,
  };
}

/** A separation as programs read it: plain, with keys in a fixed order, and without the curve. */
export function separationRecord(separation: Separation) {
  return {
    points: separation.points,
    window: { from: separation.window.from, to: separation.window.to, unit: separation.window.unit },
    model: separation.model,
    phonon_powers: [...separation.phonon_powers],
    sound_speed: estimate(separation.sound_speed),
    roton_gap: estimate(separation.roton_gap),
    phonon_coefficient: estimate(separation.phonon_coefficient),
    roton_amplitude: estimate(separation.roton_amplitude),
    chi_squared: finite(separation.chi_squared),
    degrees_of_freedom: separation.degrees_of_freedom,
    correlation: {
      names: [...separation.correlation.names],
      matrix: separation.correlation.matrix.map((row) => row.map(finite)),
    },
    graphical: {
      sound_speed: estimate(separation.graphical.sound_speed),
      roton_gap: estimate(separation.graphical.roton_gap),
    },
    alternatives: separation.alternatives.map((other) => ({
      model: other.model,
      phonon_powers: [...other.phonon_powers],
      sound_speed: estimate(other.sound_speed),
      roton_gap: estimate(other.roton_gap),
      chi_squared: finite(other.chi_squared),
      degrees_of_freedom: other.degrees_of_freedom,
      aicc: finite(other.aicc),
    })),
    missing: [...separation.missing],
  };
}

/** The same as text, two spaces deep. */
export function separationJson(separation: Separation): string {
  return `${JSON.stringify(separationRecord(separation), null, 2)}\n`;
}
