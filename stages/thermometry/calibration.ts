import { Defect } from "../errors.js";
import { type CalibrationTable, calibrationTable } from "./calibration-table.js";
import { chebyshev } from "./chebyshev.js";
import type { CalibrationConfig, ThermometerConfig } from "./config.js";
import { logPolynomial } from "./log-polynomial.js";
import { selfHeatingOf } from "./self-heating.js";
import type { Calibration, ResistanceCurve } from "./types.js";

/**
 * A thermometer's calibration, whichever form it is configured in.
 * @param table the points, for the form "table"; else null
 * @throws InputError if the calibration is no monotonic curve of positive temperatures
 */
export function calibrationOf(
  config: Pick<ThermometerConfig, "calibration" | "scale" | "lag" | "self_heating">,
  table: CalibrationTable | null,
): Calibration {
  const { calibration, scale, lag, self_heating } = config;
  return {
    ...curveOf(calibration, table),
    scale,
    u_temperature_K: calibration.standard_uncertainty.value,
    u_slope: calibration.slope_standard_uncertainty.value,
    lag_s: lag === "auto" ? null : lag.value,
    u_lag_s: lag === "auto" ? 0 : lag.u,
    selfHeating: self_heating === undefined ? null : selfHeatingOf(self_heating),
  };
}

function curveOf(calibration: CalibrationConfig, table: CalibrationTable | null): ResistanceCurve {
  switch (calibration.form) {
    case "table":
      if (table === null) throw new Defect("a table calibration without its table");
      return calibrationTable(table);
    case "log-polynomial":
      return logPolynomial(calibration);
    case "chebyshev":
      return chebyshev(calibration);
  }
}
