import { RUN_FILE } from "./bench.js";

const CAMPAIGN = "campaigns/fjord-7.yaml";
const CELL = "cells/thimble.yaml";
const SAMPLE = "samples/fill-7.yaml";
const THERMOMETER = "thermometers/ge-31.yaml";

/** One slip in an example that is otherwise sound, and the whole message a user then reads. */
export interface BadConfiguration {
  readonly what: string;
  readonly file: string;
  readonly replace: string;
  readonly by: string;
  /** Lines; paths from the laboratory's folder. */
  readonly message: readonly [string, string];
}

export const BAD_CONFIGURATIONS: readonly BadConfiguration[] = [
  {
    what: "a number without its unit",
    file: CELL,
    replace: "3.015 ± 0.006 cm3",
    by: "3.015",
    message: [
      'cells/thimble.yaml:2: volume is "3.015"; expected a volume in cm3, mL, L or m3.',
      '  Way out: add the unit, such as "3.015 cm3"',
    ],
  },
  {
    what: "a unit of another dimension",
    file: CELL,
    replace: "3.015 ± 0.006 cm3",
    by: "3.015 mol",
    message: [
      'cells/thimble.yaml:2: volume is "3.015 mol"; expected a volume in cm3, mL, L or m3.',
      '  Way out: mol is the unit of an amount of substance; give a volume, such as "3.015 cm3"',
    ],
  },
  {
    what: "a unit in the wrong case",
    file: THERMOMETER,
    replace: "0.4 mK",
    by: "0.4 mk",
    message: [
      'thermometers/ge-31.yaml:8: calibration.standard_uncertainty is "0.4 mk"; expected a temperature in K, mK or uK.',
      "  Way out: mk is not a unit known here; did you mean mK?",
    ],
  },
  {
    what: "a unit nobody knows",
    file: CELL,
    replace: "20 bar",
    by: "20 psi",
    message: [
      'cells/thimble.yaml:4: relief_pressure is "20 psi"; expected a pressure in Pa, hPa, mbar or bar.',
      "  Way out: psi is not a unit known here; known are Pa, hPa, kPa, MPa, bar, mbar, atm, Torr, mmHg",
    ],
  },
  {
    what: "a decimal comma",
    file: CELL,
    replace: "0.20 ± 0.05 cm3",
    by: "0,20 ± 0,05 cm3",
    message: [
      'cells/thimble.yaml:3: dead_volume is "0,20 ± 0,05 cm3"; expected a volume in cm3, mL, L or m3.',
      '  Way out: write a decimal point and no thousands separator: "0.20 ± 0.05 cm3"',
    ],
  },
  {
    what: "a negative volume",
    file: CELL,
    replace: "3.015 ± 0.006",
    by: "-3.015 ± 0.006",
    message: [
      'cells/thimble.yaml:2: volume is "-3.015 ± 0.006 cm3"; expected a volume in cm3, mL, L or m3, above 0.',
      '  Way out: give a value such as "3.015 ± 0.006 cm3"',
    ],
  },
  {
    what: "a share above one",
    file: CELL,
    replace: "0.5 ± 0.1",
    by: "1.5 ± 0.1",
    message: [
      'cells/thimble.yaml:6: heater.lead_share is "1.5 ± 0.1"; expected a plain number, or one in %, at most 1.',
      '  Way out: give a value such as "0.5 ± 0.1"',
    ],
  },
  {
    what: "a percentage of what?",
    file: CELL,
    replace: '"0.5 ± 0.1"',
    by: '"0.5 ± 10 %"',
    message: [
      'cells/thimble.yaml:6: heater.lead_share is "0.5 ± 10 %"; expected a plain number, or one in %.',
      '  Way out: say of what the percentage is: "0.5 ± 0.05" if of the value, "(0.5 ± 10) %" if both are percentages',
    ],
  },
  {
    what: "a misspelt key",
    file: CELL,
    replace: "relief_pressure",
    by: "relief_presure",
    message: [
      'cells/thimble.yaml:4: relief_presure is "20 bar"; expected one of the keys version, cell, volume, dead_volume, relief_pressure, thermometer, heater.',
      "  Way out: did you mean relief_pressure?",
    ],
  },
  {
    what: "a misspelt required key",
    file: CELL,
    replace: "volume: 3.015",
    by: "volum: 3.015",
    message: [
      'cells/thimble.yaml:2: volum is "3.015 ± 0.006 cm3"; expected one of the keys version, cell, volume, dead_volume, relief_pressure, thermometer, heater.',
      "  Way out: did you mean volume?",
    ],
  },
  {
    what: "a key nobody knows",
    file: CELL,
    replace: "relief_pressure: 20 bar",
    by: "colour: blue",
    message: [
      'cells/thimble.yaml:4: colour is "blue"; expected one of the keys version, cell, volume, dead_volume, relief_pressure, thermometer, heater.',
      "  Way out: remove it, or put # before it to keep it as a comment",
    ],
  },
  {
    what: "a key one level too high",
    file: CAMPAIGN,
    replace: "reduction:\n  pulses:   { method: auto }",
    by: "method: drift\nreduction:\n  pulses:   { method: auto }",
    message: [
      'campaigns/fjord-7.yaml:8: method is "drift"; expected one of the keys version, campaign, cell, sample, runs, addenda, reduction, publication, output.',
      "  Way out: method belongs under reduction.pulses",
    ],
  },
  {
    what: "a missing key",
    file: CELL,
    replace: "volume: 3.015 ± 0.006 cm3\n",
    by: "",
    message: [
      "cells/thimble.yaml: volume is missing; expected a volume in cm3, mL, L or m3.",
      '  Way out: give a volume, such as "3.015 ± 0.006 cm3"',
    ],
  },
  {
    what: "a missing key deep down",
    file: RUN_FILE,
    replace: "    resistance: { column: R, unit: Ohm }\n",
    by: "",
    message: [
      "nights/fjord-7/2026-11-14-a/run.yaml:3: logs.thermometer.resistance is missing; expected a block with the keys column, unit.",
      "  Way out: write resistance: { column: R, unit: Ohm }",
    ],
  },
  {
    what: "a key twice",
    file: CELL,
    replace: "relief_pressure: 20 bar",
    by: "volume: 3 cm3",
    message: [
      "cells/thimble.yaml:4: expected the key volume once.",
      "  Way out: keep one of the two lines with volume:",
    ],
  },
  {
    what: "a tab",
    file: CELL,
    replace: "heater: {",
    by: "\theater: {",
    message: [
      "cells/thimble.yaml:6: expected spaces before a key, not tabs.",
      "  Way out: replace each tab by two spaces",
    ],
  },
  {
    what: "a bracket that does not close",
    file: CELL,
    replace: '"0.5 ± 0.1" }',
    by: '"0.5 ± 0.1"',
    message: [
      "cells/thimble.yaml:7: expected a closing }.",
      "  Way out: close the bracket opened above; what follows a # is a comment unless it is in quotes",
    ],
  },
  {
    what: "a colon in a value",
    file: SAMPLE,
    replace: "substance: helium-4",
    by: "substance: helium-4: pure",
    message: [
      "samples/fill-7.yaml:2: expected one colon and space in a line.",
      "  Way out: put a value that holds a colon in quotes",
    ],
  },
  {
    what: "a pattern that begins with an asterisk",
    file: CAMPAIGN,
    replace: "../nights/fjord-7/*/run.yaml",
    by: "*/run.yaml",
    message: [
      'campaigns/fjord-7.yaml:5: found "*/run.yaml"; expected text; an asterisk at the beginning means a reference in YAML.',
      '  Way out: put it in quotes: "*/run.yaml"',
    ],
  },
  {
    what: "a word not in the list",
    file: CAMPAIGN,
    replace: "method: auto",
    by: "method: relaxtion",
    message: [
      'campaigns/fjord-7.yaml:9: reduction.pulses.method is "relaxtion"; expected auto, drift, two-body or relaxation.',
      "  Way out: did you mean relaxation?",
    ],
  },
  {
    what: "a word far from the list",
    file: CAMPAIGN,
    replace: "method: auto",
    by: "method: guess",
    message: [
      'campaigns/fjord-7.yaml:9: reduction.pulses.method is "guess"; expected auto, drift, two-body or relaxation.',
      "  Way out: write method: auto",
    ],
  },
  {
    what: "a log of unknown kind",
    file: RUN_FILE,
    replace: "kind: events",
    by: "kind: pulses",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:9: logs.heater.kind is "pulses"; expected events or sampled.',
      "  Way out: write kind: events",
    ],
  },
  {
    what: "a log without its kind",
    file: RUN_FILE,
    replace: "    kind: events                                # events (one row a pulse) | sampled\n",
    by: "",
    message: [
      "nights/fjord-7/2026-11-14-a/run.yaml:7: logs.heater.kind is missing; expected events or sampled.",
      "  Way out: write kind: events",
    ],
  },
  {
    what: "a key of the other kind",
    file: RUN_FILE,
    replace: "kind: events ",
    by: "kind: sampled ",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:11: logs.heater.duration is "{ column: duration, unit: s }"; expected one of the keys kind, file, time, current, voltage, pulse_length, format.',
      "  Way out: duration goes with kind: events",
    ],
  },
  {
    what: "a column without unit",
    file: RUN_FILE,
    replace: "{ column: I, unit: mA }",
    by: "I",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:12: logs.heater.current is "I"; expected a block with the keys column, unit.',
      "  Way out: write current: { column: I, unit: A }",
    ],
  },
  {
    what: "a column in a wrong unit",
    file: RUN_FILE,
    replace: "{ column: I, unit: mA }",
    by: "{ column: I, unit: mV }",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:12: logs.heater.current.unit is "mV"; expected a current in A, mA, uA or nA.',
      "  Way out: mV is the unit of a voltage; did you mean another column, or unit: mA?",
    ],
  },
  {
    what: "a column number below 1",
    file: RUN_FILE,
    replace: "{ column: I, unit: mA }",
    by: "{ column: 0, unit: mA }",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:12: logs.heater.current.column is "0"; expected a column\'s heading, or its number from 1 on.',
      "  Way out: write column: R for the column headed R, or column: 2 for the second of a file without headings",
    ],
  },
  {
    what: "a place name for a zone",
    file: RUN_FILE,
    replace: "{ column: t, unit: s }          # or",
    by: "{ column: t, unit: iso8601, zone: Europe/Oslo } #",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:5: logs.thermometer.time.zone is "Europe/Oslo"; expected UTC or an offset from UTC such as +01:00.',
      "  Way out: give the offset the instrument's clock had that night; place names are refused, since a change to or from summer time makes an hour ambiguous",
    ],
  },
  {
    what: "a comma for both",
    file: RUN_FILE,
    replace: "delimiter: auto, decimal: auto",
    by: 'delimiter: ",", decimal: ","',
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:15: format.decimal is ","; expected another mark than the delimiter, which is ",".',
      '  Way out: write decimal: "." or name the delimiter that the file has',
    ],
  },
  {
    what: "a span backwards",
    file: RUN_FILE,
    replace: 'to: "1500 s"',
    by: 'to: "900 s"',
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:17: exclude[0].to is "900 s"; expected a moment after 1200 s.',
      "  Way out: exchange from and to, or mend the one that is wrong",
    ],
  },
  {
    what: "a moment that is none",
    file: RUN_FILE,
    replace: 'from: "1200 s"',
    by: "from: midnight",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:17: exclude[0].from is "midnight"; expected a duration from the night\'s first sample, or an ISO 8601 date and time.',
      '  Way out: write "1200 s", or "2026-11-14T23:40:00Z"',
    ],
  },
  {
    what: "a pulse judged twice",
    file: RUN_FILE,
    replace: "veto:    [",
    by: "veto:    [{ pulse: 17, reason: lorry }, ",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:18: veto[1].pulse is "17"; expected each pulse once.',
      "  Way out: keep one entry for pulse 17",
    ],
  },
  {
    what: "a pulse 0",
    file: RUN_FILE,
    replace: "pulse: 17",
    by: "pulse: 0",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:18: veto[0].pulse is "0"; expected a whole number of at least 1.',
      "  Way out: write pulse: 17",
    ],
  },
  {
    what: "a veto without reason",
    file: RUN_FILE,
    replace: ", reason: door slammed",
    by: "",
    message: [
      "nights/fjord-7/2026-11-14-a/run.yaml:18: veto[0].reason is missing; expected text.",
      '  Way out: write text, such as "door slammed"',
    ],
  },
  {
    what: "a name that is no file name",
    file: RUN_FILE,
    replace: "run: 2026-11-14-a",
    by: "run: 2026/11/14",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:1: run is "2026/11/14"; expected a name that can be a file name: letters, digits, dot, hyphen, underscore, plus; 80 at most.',
      "  Way out: write a name such as 2026-11-14-a",
    ],
  },
  {
    what: "a name that YAML takes for a number",
    file: RUN_FILE,
    replace: "run: 2026-11-14-a",
    by: "run: 20261114",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:1: run is "20261114"; expected a name that can be a file name: letters, digits, dot, hyphen, underscore, plus; 80 at most.',
      '  Way out: put it in quotes: "20261114"',
    ],
  },
  {
    what: "an empty value",
    file: SAMPLE,
    replace: "substance: helium-4",
    by: "substance:",
    message: [
      'samples/fill-7.yaml:2: substance is ""; expected helium-4.',
      "  Way out: write substance: helium-4",
    ],
  },
  {
    what: "another substance",
    file: SAMPLE,
    replace: "helium-4",
    by: "helium-3",
    message: [
      'samples/fill-7.yaml:2: substance is "helium-3"; expected helium-4.',
      "  Way out: write substance: helium-4",
    ],
  },
  {
    what: "no amount",
    file: SAMPLE,
    replace: "amount: 0.1093 ± 0.0004 mol",
    by: "# ",
    message: [
      "samples/fill-7.yaml: expected either amount or gas.",
      '  Way out: add amount: "0.1093 ± 0.0004 mol", or gas: with pressure, volume and temperature',
    ],
  },
  {
    what: "amount and gas",
    file: SAMPLE,
    replace: "condition:",
    by: "gas: { pressure: 1 bar, volume: 3 L, temperature: 296 K }\ncondition:",
    message: [
      'samples/fill-7.yaml:4: gas is "{ pressure: 1 bar, volume: 3 L, temperature: 296 K }"; expected either amount or gas.',
      "  Way out: keep the one that was measured",
    ],
  },
  {
    what: "saturated vapour, no vapour space",
    file: SAMPLE,
    replace:
      "constant-volume            # or saturated-vapour (then vapour_space is needed)\nvapour_space: 0.40 ± 0.05 cm3",
    by: "saturated-vapour",
    message: [
      "samples/fill-7.yaml: vapour_space is missing; expected the volume above the liquid, since condition is saturated-vapour.",
      '  Way out: add vapour_space: "0.40 ± 0.05 cm3"',
    ],
  },
  {
    what: "room temperature in °C",
    file: SAMPLE,
    replace: "amount: 0.1093 ± 0.0004 mol",
    by: "gas: { pressure: 1 bar, volume: 3 L, temperature: 22 °C }\n#",
    message: [
      'samples/fill-7.yaml:3: gas.temperature is "22 °C"; expected a temperature in K, mK or uK.',
      "  Way out: convert to kelvin: T/K = t/°C + 273.15",
    ],
  },
  {
    what: "a window upside down",
    file: CAMPAIGN,
    replace: '["0.35 K", "1.15 K"]',
    by: '["1.15 K", "0.35 K"]',
    message: [
      'campaigns/fjord-7.yaml:10: reduction.separate.window is "[\\"1.15 K\\", \\"0.35 K\\"]"; expected the lower temperature first.',
      '  Way out: write ["0.35 K", "1.15 K"], if the two differ',
    ],
  },
  {
    what: "a window of one",
    file: CAMPAIGN,
    replace: '["0.35 K", "1.15 K"]',
    by: '["1.15 K"]',
    message: [
      'campaigns/fjord-7.yaml:10: reduction.separate.window is "[\\"1.15 K\\"]"; expected a list of 2.',
      '  Way out: write window: ["0.35 K","1.15 K"]',
    ],
  },
  {
    what: "phonon powers in words",
    file: CAMPAIGN,
    replace: "phonon_powers: auto",
    by: "phonon_powers: all",
    message: [
      'campaigns/fjord-7.yaml:10: reduction.separate.phonon_powers is "all"; expected auto or a list of at least 1, each a whole number from 3 to 15.',
      "  Way out: write phonon_powers: [3, 5, 7]",
    ],
  },
  {
    what: "a material not in the table",
    file: CAMPAIGN,
    replace: "material: copper",
    by: "material: coper",
    message: [
      'campaigns/fjord-7.yaml:7: addenda.parts[0].material is "coper"; expected copper, copper-ofhc, silver, gold, aluminium-normal, aluminium-superconducting, indium-normal, indium-superconducting, tin-superconducting, silicon, germanium, torlon, torlon-above-1K, apiezon-n, sapphire or quartz.',
      "  Way out: did you mean copper?",
    ],
  },
  {
    what: "addenda both ways",
    file: CAMPAIGN,
    replace: "addenda:\n",
    by: "addenda:\n  runs: ../nights/thimble-empty/*/run.yaml\n",
    message: [
      'campaigns/fjord-7.yaml:6: addenda is "runs: ../nights/thimble-empty/*/run.yaml parts: [{ material…"; expected either runs or parts.',
      "  Way out: keep runs: if the empty cell was measured, otherwise parts:",
    ],
  },
  {
    what: "a file that is not there",
    file: CAMPAIGN,
    replace: "../cells/thimble.yaml",
    by: "../cells/thimbel.yaml",
    message: [
      'campaigns/fjord-7.yaml:3: cell is "../cells/thimbel.yaml"; expected a file that exists.',
      "  Way out: the folder cells holds thimble.yaml",
    ],
  },
  {
    what: "a folder that is not there",
    file: CAMPAIGN,
    replace: "../cells/thimble.yaml",
    by: "../cell/thimble.yaml",
    message: [
      'campaigns/fjord-7.yaml:3: cell is "../cell/thimble.yaml"; expected a file that exists.',
      "  Way out: there is no folder cell; paths are relative to the file that names them",
    ],
  },
  {
    what: "a log that is not there",
    file: RUN_FILE,
    replace: "file: heater.csv",
    by: "file: heaters.csv",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:8: logs.heater.file is "heaters.csv"; expected a file that exists.',
      "  Way out: the folder nights/fjord-7/2026-11-14-a holds heater.csv, stage.csv, thermometer.csv and 1 more",
    ],
  },
  {
    what: "a pattern that matches nothing",
    file: CAMPAIGN,
    replace: "../nights/fjord-7/*/run.yaml",
    by: "../nights/fjord-8/*/run.yaml",
    message: [
      'campaigns/fjord-7.yaml:5: runs is "../nights/fjord-8/*/run.yaml"; expected a pattern that matches at least one run file.',
      "  Way out: in nights nothing matches fjord-8; it holds fjord-7, thimble-empty",
    ],
  },
  {
    what: "a cell where a sample is expected",
    file: CAMPAIGN,
    replace: "../samples/fill-7.yaml",
    by: "../cells/thimble.yaml",
    message: [
      'campaigns/fjord-7.yaml:4: sample is "../cells/thimble.yaml"; expected a sample file, with a key sample.',
      "  Way out: cells/thimble.yaml is a cell file; name another",
    ],
  },
  {
    what: "output over the inputs",
    file: CAMPAIGN,
    replace: "../out/fjord-7",
    by: "../nights",
    message: [
      'campaigns/fjord-7.yaml:11: output is "../nights"; expected a folder that holds no input; nights/fjord-7/2026-11-14-a/run.yaml lies in it.',
      "  Way out: choose a folder for results alone, such as output: ../out/fjord-7",
    ],
  },
  {
    what: "the first key misspelt",
    file: CAMPAIGN,
    replace: "campaign: fjord",
    by: "campain: fjord",
    message: [
      'campaigns/fjord-7.yaml:2: campain is "fjord-7"; expected one of the keys version, campaign, cell, sample, runs, addenda, reduction, publication, output.',
      "  Way out: did you mean campaign?",
    ],
  },
  {
    what: "two faults in one file",
    file: CELL,
    replace: "volume: 3.015 ± 0.006 cm3\ndead_volume: 0.20 ± 0.05 cm3",
    by: "volume: 3\ndead_volume: 1 K",
    message: [
      'cells/thimble.yaml:2: volume is "3"; expected a volume in cm3, mL, L or m3.',
      '  Way out: add the unit, such as "3 cm3". Then see to dead_volume',
    ],
  },
  {
    what: "a word for a block of keys",
    file: CAMPAIGN,
    replace: "  pulses:   { method: auto }",
    by: "  pulses: auto",
    message: [
      'campaigns/fjord-7.yaml:9: reduction.pulses is "auto"; expected a block with the keys method, settle, window, smallest_rise, largest_rise, largest_drift_share, largest_settle_share, largest_missing_share, largest_spike_share, largest_boundary_share, largest_stage_share, largest_misfit, largest_power_change, heater_resistance_tolerance, exclude_flags.',
      "  Way out: write pulses: { method: auto }",
    ],
  },
  {
    what: "too few coefficients, and a range upside down",
    file: THERMOMETER,
    replace:
      "form: table                         # table | log-polynomial | chebyshev\n  file: ge-31.csv\n  temperature: { column: T_K, unit: K }\n  resistance:  { column: R_ohm, unit: Ohm }",
    by: "form: log-polynomial\n  coefficients: [1]\n  resistance_range: [48 kOhm, 210 Ohm]",
    message: [
      'thermometers/ge-31.yaml:5: calibration.coefficients is "[1]"; expected a list of at least 2, each a number.',
      "  Way out: write coefficients: [1.62, -0.81, 0.043]. Then see to calibration.resistance_range",
    ],
  },
  {
    what: "a key of another form",
    file: THERMOMETER,
    replace: "file: ge-31.csv",
    by: "coefficients: [1, 2]",
    message: [
      "thermometers/ge-31.yaml:3: calibration.file is missing; expected text.",
      '  Way out: write text, such as "ge-31.csv". Then see to calibration.coefficients',
    ],
  },
  {
    what: "a slope that is known to no better than itself",
    file: THERMOMETER,
    replace: "standard_uncertainty: 0.4 mK",
    by: "standard_uncertainty: 0.4 mK\n  slope_standard_uncertainty: 5",
    message: [
      'thermometers/ge-31.yaml:9: calibration.slope_standard_uncertainty is "5"; expected a plain number, or one in %, at most 1.',
      '  Way out: give a value such as "0.05 %"',
    ],
  },
  {
    what: "a slope in kelvin",
    file: THERMOMETER,
    replace: "standard_uncertainty: 0.4 mK",
    by: "standard_uncertainty: 0.4 mK\n  slope_standard_uncertainty: 0.4 mK",
    message: [
      'thermometers/ge-31.yaml:9: calibration.slope_standard_uncertainty is "0.4 mK"; expected a plain number, or one in %.',
      '  Way out: mK is the unit of a temperature; give a plain number, such as "0.5"',
    ],
  },
  {
    what: "a thermometer ahead of its body",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nlag: -2 s",
    message: [
      'thermometers/ge-31.yaml:3: lag is "-2 s"; expected auto, or a duration in s, ms, us or min, not below 0.',
      '  Way out: give a value such as "2 ± 0.5 s"',
    ],
  },
  {
    what: "a lag without its unit",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nlag: 2",
    message: [
      'thermometers/ge-31.yaml:3: lag is "2"; expected auto, or a duration in s, ms, us or min.',
      '  Way out: add the unit, such as "2 s"',
    ],
  },
  {
    what: "self-heating without its excitation",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nself_heating: { thermal_resistance: 2e5 K/W, at: 0.5 K }",
    message: [
      'thermometers/ge-31.yaml:3: self_heating is "{ thermal_resistance: 2e5 K/W, at: 0.5 K }"; expected one of current, voltage and power.',
      '  Way out: add current: "1 nA", or voltage: or power:, whichever the bridge keeps constant',
    ],
  },
  {
    what: "self-heating by a current and a voltage",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nself_heating: { current: 1 nA, voltage: 50 µV, thermal_resistance: 2e5 K/W, at: 0.5 K }",
    message: [
      'thermometers/ge-31.yaml:3: self_heating.voltage is "50 µV"; expected one of current, voltage and power.',
      "  Way out: keep the one that the bridge keeps constant",
    ],
  },
  {
    what: "a thermal resistance without its temperature",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nself_heating: { current: 1 nA, thermal_resistance: 2e5 K/W }",
    message: [
      "thermometers/ge-31.yaml:3: self_heating.at is missing; expected a temperature in K, mK or uK.",
      '  Way out: give a temperature, such as "0.5 K"',
    ],
  },
  {
    what: "a conductance for a resistance",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nself_heating: { current: 1 nA, thermal_resistance: 5e-6 W/K, at: 0.5 K }",
    message: [
      'thermometers/ge-31.yaml:3: self_heating.thermal_resistance is "5e-6 W/K"; expected a thermal resistance in K/W, mK/W, kK/W or MK/W.',
      '  Way out: W/K is the unit of a thermal conductance; give a thermal resistance, such as "50 K/W"',
    ],
  },
  {
    what: "a power law out of all bounds",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nself_heating: { power: 1 fW, thermal_resistance: 2e5 K/W, at: 0.5 K, power_law: 30 }",
    message: [
      'thermometers/ge-31.yaml:3: self_heating.power_law is "30"; expected a number from -6 to 6.',
      "  Way out: write power_law: -3",
    ],
  },
  {
    what: "a misspelt key of the self-heating",
    file: THERMOMETER,
    replace: "scale: ITS-90",
    by: "scale: ITS-90\nself_heating: { curent: 1 nA, thermal_resistance: 2e5 K/W, at: 0.5 K }",
    message: [
      'thermometers/ge-31.yaml:3: self_heating.curent is "1 nA"; expected one of the keys current, voltage, power, thermal_resistance, at, power_law.',
      "  Way out: did you mean current?. Then see to self_heating",
    ],
  },
  {
    what: "a number for a pattern",
    file: CAMPAIGN,
    replace: "runs: ../nights/fjord-7/*/run.yaml",
    by: "runs: 17",
    message: [
      'campaigns/fjord-7.yaml:5: runs is "17"; expected text or a list of at least 1, each text.',
      "  Way out: write runs: ../nights/fjord-7/*/run.yaml",
    ],
  },
  {
    what: "a word for a number",
    file: CAMPAIGN,
    replace: "method: auto",
    by: "method: auto, smallest_rise: tiny",
    message: [
      'campaigns/fjord-7.yaml:9: reduction.pulses.smallest_rise is "tiny"; expected a number from 0 to 1.',
      "  Way out: write smallest_rise: 0.002",
    ],
  },
  {
    what: "a share above 1 in the reduction",
    file: CAMPAIGN,
    replace: "method: auto",
    by: "method: auto, smallest_rise: 2",
    message: [
      'campaigns/fjord-7.yaml:9: reduction.pulses.smallest_rise is "2"; expected a number from 0 to 1.',
      "  Way out: write smallest_rise: 0.002",
    ],
  },
  {
    what: "smallest rise above the largest",
    file: CAMPAIGN,
    replace: "method: auto",
    by: "method: auto, smallest_rise: 0.5",
    message: [
      'campaigns/fjord-7.yaml:9: reduction.pulses.smallest_rise is "0.5"; expected a number below largest_rise, 0.3.',
      "  Way out: lower smallest_rise or raise largest_rise",
    ],
  },
  {
    what: "a flag that is none",
    file: CAMPAIGN,
    replace: "method: auto",
    by: "method: auto, exclude_flags: [spike]",
    message: [
      'campaigns/fjord-7.yaml:9: reduction.pulses.exclude_flags[0] is "spike"; expected no-data, rise-too-small, rise-too-large, drift-too-strong, not-settled, samples-missing, spikes, outside-calibration, heater-resistance, truncated, zero-energy, voltage-inverted, heater-left-on, slow-boundary, stage-not-steady, unexplained, heater-unsteady or reading-jumps.',
      "  Way out: did you mean spikes?",
    ],
  },
  {
    what: "a word for true or false",
    file: RUN_FILE,
    replace: "reason: door slammed",
    by: "reason: door slammed, keep: maybe",
    message: [
      'nights/fjord-7/2026-11-14-a/run.yaml:18: veto[0].keep is "maybe"; expected true or false.',
      "  Way out: write keep: false",
    ],
  },
  {
    what: "a later version of the form",
    file: CELL,
    replace: "cell: thimble",
    by: "version: 2\ncell: thimble",
    message: ['cells/thimble.yaml:1: version is "2"; expected 1.', "  Way out: write version: 1"],
  },
  {
    what: "a quantity in pieces",
    file: CELL,
    replace: "20 bar",
    by: "[20, bar]",
    message: [
      'cells/thimble.yaml:4: relief_pressure is "[20, bar]"; expected a pressure in Pa, hPa, mbar or bar.',
      '  Way out: write one text, such as "20 bar"',
    ],
  },
  {
    what: "a comment sign without quotes",
    file: RUN_FILE,
    replace: 'comment: "#"',
    by: "comment: #",
    message: [
      "nights/fjord-7/2026-11-14-a/run.yaml:16: expected a closing }.",
      "  Way out: close the bracket opened above; what follows a # is a comment unless it is in quotes",
    ],
  },
  {
    what: "a dash before the keys",
    file: CELL,
    replace: "cell:",
    by: "- cell:",
    message: [
      "cells/thimble.yaml:2: expected YAML: unexpected scalar at node end.",
      "  Way out: look at indentation, quotes and brackets on this line and the one above",
    ],
  },
];
