import { InputError } from "../errors.js";

interface DimensionWords {
  readonly si: string;
  readonly noun: string;
  readonly example: string;
  /** Units a message offers; by default the first of the table. */
  readonly usual?: readonly string[];
}

/** What a quantity is, with its SI unit, how messages speak of it, and an example that works. */
export const DIMENSIONS = {
  temperature: { si: "K", noun: "a temperature", example: "0.35 K" },
  time: { si: "s", noun: "a duration", example: "30 s" },
  resistance: { si: "Ohm", noun: "a resistance", example: "2.4 Ohm" },
  current: { si: "A", noun: "a current", example: "1.5 mA" },
  voltage: { si: "V", noun: "a voltage", example: "20 mV" },
  power: { si: "W", noun: "a power", example: "3 µW" },
  energy: { si: "J", noun: "an energy", example: "40 µJ" },
  pressure: { si: "Pa", noun: "a pressure", example: "20 bar", usual: ["Pa", "hPa", "mbar", "bar"] },
  volume: { si: "m3", noun: "a volume", example: "3.015 cm3", usual: ["cm3", "mL", "L", "m3"] },
  mass: { si: "kg", noun: "a mass", example: "24.1 g" },
  amount: { si: "mol", noun: "an amount of substance", example: "0.1093 mol" },
  "molar volume": { si: "m3/mol", noun: "a molar volume", example: "27.58 cm3/mol" },
  "molar heat capacity": { si: "J/(mol K)", noun: "a molar heat capacity", example: "0.1 J/(mol K)" },
  speed: { si: "m/s", noun: "a speed", example: "238 m/s" },
  wavenumber: { si: "1/m", noun: "a wavenumber", example: "1.92 1/angstrom" },
  "temperature rate": { si: "K/s", noun: "a rate of temperature", example: "2 µK/s" },
  "thermal conductance": { si: "W/K", noun: "a thermal conductance", example: "2e-6 W/K" },
  "heat capacity": { si: "J/K", noun: "a heat capacity", example: "1e-3 J/K" },
  "thermal resistance": { si: "K/W", noun: "a thermal resistance", example: "50 K/W" },
  frequency: { si: "Hz", noun: "a frequency", example: "10 Hz" },
  dimensionless: { si: "1", noun: "a plain number", example: "0.5" },
} as const satisfies Readonly<Record<string, DimensionWords>>;

export type Dimension = keyof typeof DIMENSIONS;

export interface Unit {
  /** As written by the user. */
  readonly symbol: string;
  readonly dimension: Dimension;
  /** SI value = factor × number. */
  readonly factor: number;
}

const PREFIX = {
  "": 1,
  f: 1e-15,
  p: 1e-12,
  n: 1e-9,
  u: 1e-6,
  µ: 1e-6,
  μ: 1e-6,
  m: 1e-3,
  h: 1e2,
  k: 1e3,
  M: 1e6,
} as const;
/** Micro sign (U+00B5), Greek mu (U+03BC) and the typewriter's u. */
const MICRO = ["u", "µ", "μ"] as const;

const table = new Map<string, Unit>();

function add(dimension: Dimension, factors: Readonly<Record<string, number>>): void {
  for (const [symbol, factor] of Object.entries(factors)) table.set(symbol, { symbol, dimension, factor });
}

function addPrefixed(
  dimension: Dimension,
  symbols: readonly string[],
  prefixes: readonly (keyof typeof PREFIX)[],
): void {
  for (const symbol of symbols) {
    for (const prefix of prefixes) add(dimension, { [prefix + symbol]: PREFIX[prefix] });
  }
}

addPrefixed("temperature", ["K"], ["", "m", ...MICRO]);
addPrefixed("time", ["s"], ["", "m", ...MICRO]);
add("time", { min: 60, h: 3600, d: 86400 });
// Greek capital omega (U+03A9) and the ohm sign (U+2126) look alike and both occur in files.
addPrefixed("resistance", ["Ohm", "\u03a9", "\u2126"], ["", "m", "k", "M"]);
addPrefixed("current", ["A"], ["", "m", ...MICRO, "n", "p"]);
addPrefixed("voltage", ["V"], ["", "m", ...MICRO, "n"]);
// What excites a thermometer is a few nA and below, and heats it by fW to pW.
addPrefixed("power", ["W"], ["", "m", ...MICRO, "n", "p", "f"]);
addPrefixed("energy", ["J"], ["", "m", ...MICRO, "n"]);
addPrefixed("pressure", ["Pa"], ["", "h", "k", "M"]);
// atm and Torr: 101325 Pa and 101325/760 Pa exactly; mmHg: 133.322387415 Pa, conventional
// (NIST SP 811 (2008), appendix B.8, gives 133.3224 Pa for both Torr and conventional mmHg).
add("pressure", { bar: 1e5, mbar: 1e2, atm: 101325, Torr: 101325 / 760, mmHg: 133.322387415 });
add("volume", { m3: 1, cm3: 1e-6, mm3: 1e-9, L: 1e-3, l: 1e-3, mL: 1e-6, ml: 1e-6 });
add("mass", { kg: 1, g: 1e-3, mg: 1e-6 });
addPrefixed("amount", ["mol"], ["", "m", ...MICRO]);
add("molar volume", { "m3/mol": 1, "cm3/mol": 1e-6, "L/mol": 1e-3 });
addPrefixed("molar heat capacity", ["J/(mol K)", "J/(mol.K)", "J/mol/K"], ["", "m"]);
add("speed", { "m/s": 1, "cm/s": 1e-2, "km/s": 1e3 });
add("wavenumber", { "1/m": 1, "1/cm": 1e2, "1/nm": 1e9, "1/angstrom": 1e10, "1/Å": 1e10, "1/\u212b": 1e10 });
addPrefixed("temperature rate", ["K/s"], ["", "m", ...MICRO, "n"]);
addPrefixed("thermal conductance", ["W/K"], ["", "m", ...MICRO, "n"]);
addPrefixed("heat capacity", ["J/K"], ["", "m", ...MICRO, "n"]);
addPrefixed("thermal resistance", ["K/W"], ["", "m", "k", "M"]);
add("thermal resistance", { "K/mW": 1e3, "K/uW": 1e6, "K/µW": 1e6, "K/μW": 1e6 });
addPrefixed("frequency", ["Hz"], ["", "m", "k"]);
add("dimensionless", { "1": 1, "%": 1e-2 });

/** Every unit known, by symbol. The table is closed: what is not here is refused, never guessed. */
export const UNITS: ReadonlyMap<string, Unit> = table;

/** Words people write for a symbol; suggested, not accepted, so that a file has one spelling. */
const WORDS: Readonly<Record<string, string>> = {
  kelvin: "K",
  sec: "s",
  second: "s",
  seconds: "s",
  minute: "min",
  minutes: "min",
  hr: "h",
  hour: "h",
  hours: "h",
  day: "d",
  days: "d",
  ohms: "Ohm",
  amp: "A",
  amps: "A",
  volt: "V",
  volts: "V",
  watt: "W",
  watts: "W",
  joule: "J",
  joules: "J",
  liter: "L",
  litre: "L",
  cc: "cm3",
  ccm: "cm3",
  gram: "g",
  mole: "mol",
  moles: "mol",
  percent: "%",
  none: "1",
};

/** One spelling for what means the same: cm³ and cm^3 are cm3. */
function plainSymbol(written: string): string {
  return written
    .trim()
    .replace(/\^/g, "")
    .replace(/³/g, "3")
    .replace(/[·⋅]/g, ".")
    .replace(/\s+/g, " ")
    .replace(/\s*\/\s*/g, "/");
}

/** The unit of that symbol, or undefined. Case matters: mOhm and MOhm are nine decades apart. */
export function findUnit(written: string): Unit | undefined {
  return UNITS.get(plainSymbol(written));
}

/** Symbols of a dimension in the order of the table, ASCII spellings only (as a message lists them). */
export function unitsOf(dimension: Dimension): readonly string[] {
  return [...UNITS.values()]
    .filter((unit) => unit.dimension === dimension && /^[\x20-\x7e]+$/.test(unit.symbol))
    .map((unit) => unit.symbol);
}

/** The known symbol nearest to a mistaken one, of the wanted dimension where one is near. */
export function nearestUnit(written: string, dimension?: Dimension): string | undefined {
  const symbol = plainSymbol(written);
  const word = WORDS[symbol.toLowerCase()];
  if (word !== undefined) return word;
  const wanted = [...UNITS.values()].filter((unit) => unit.dimension === dimension);
  return nearest(symbol, wanted) ?? nearest(symbol, [...UNITS.values()]);
}

function nearest(symbol: string, units: readonly Unit[]): string | undefined {
  let best: string | undefined;
  // A one-letter unit is one letter away from every other: only slips of case count there.
  let least = symbol.length <= 2 ? 0.6 : 1.6;
  for (const unit of units) {
    const distance = slips(symbol, unit.symbol);
    if (distance < least) {
      best = unit.symbol;
      least = distance;
    }
  }
  return best;
}

/** Edit distance in which a slip of case costs half. */
export function slips(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const next = [i];
    for (let j = 1; j <= b.length; j++) {
      const [x, y] = [a[i - 1]!, b[j - 1]!];
      const change = x === y ? 0 : x.toLowerCase() === y.toLowerCase() ? 0.5 : 1;
      next.push(Math.min(row[j]! + 1, next[j - 1]! + 1, row[j - 1]! + change));
    }
    row = next;
  }
  return row[b.length]!;
}

/** "a temperature in K, mK or uK": how a message speaks of a dimension. */
export function expectedUnit(dimension: Dimension): string {
  const { noun, usual }: DimensionWords = DIMENSIONS[dimension];
  if (dimension === "dimensionless") return `${noun}, or one in %`;
  const names = [...(usual ?? unitsOf(dimension).slice(0, 4))];
  const last = names.pop()!;
  return `${noun} in ${names.length === 0 ? last : `${names.join(", ")} or ${last}`}`;
}

/** The unit of a dimension's example: the one the bench uses. */
export function usualUnit(dimension: Dimension): string {
  return DIMENSIONS[dimension].example.replace(/^\S+ ?/, "");
}

/**
 * The unit of that symbol and dimension.
 * @throws InputError naming the dimension wanted and, where one is near, the symbol meant
 */
export function parseUnit(written: string, dimension: Dimension): Unit {
  const unit = findUnit(written);
  if (unit?.dimension === dimension) return unit;
  throw new InputError({ value: written, ...unitFault(written, dimension) });
}

/** What was expected in place of a unit, and a way out. */
export function unitFault(written: string, dimension: Dimension): { expected: string; wayOut: string } {
  const unit = findUnit(written);
  const expected = expectedUnit(dimension);
  if (unit !== undefined) {
    return {
      expected,
      wayOut: `${written} is the unit of ${DIMENSIONS[unit.dimension].noun}; give ${DIMENSIONS[dimension].noun}, such as "${DIMENSIONS[dimension].example}"`,
    };
  }
  if (/^°|^deg|^[CF]$/.test(written)) {
    return { expected, wayOut: "convert to kelvin: T/K = t/°C + 273.15" };
  }
  const near = nearestUnit(written, dimension);
  return {
    expected,
    wayOut:
      near === undefined
        ? `${written} is not a unit known here; known are ${unitsOf(dimension).join(", ")}`
        : `${written} is not a unit known here; did you mean ${near}?`,
  };
}
