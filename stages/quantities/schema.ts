import { z } from "zod";
import { InputError } from "../errors.js";
import { parseQuantity } from "./quantity.js";
import type { Quantity } from "./types.js";
import {
  DIMENSIONS,
  type Dimension,
  expectedUnit,
  findUnit,
  UNITS,
  unitFault,
  unitsOf,
  usualUnit,
} from "./units.js";

/*
 * Building blocks of every configuration schema. A value that is refused raises a zod issue whose `params`
 * carry what was expected and a way out; pipeline/config turns it into one message with file and line.
 * What an editor should see (type, examples, default as written) travels in the schema's metadata, since a
 * transformed value has no JSON Schema of its own.
 */

/** Metadata keys that the JSON Schema writer renames to `examples`. */
export interface Written {
  readonly description: string;
  readonly example?: string;
}

export interface QuantityOptions extends Written {
  /** "positive": above 0; "not-negative": 0 allowed. Any sign by default. */
  readonly sign?: "positive" | "not-negative";
  /** Largest value allowed, SI. */
  readonly atMost?: number;
}

/** A key's value read by a function that throws InputError. */
export function reading<T>(
  read: (input: unknown) => T,
  meta: Readonly<Record<string, unknown>>,
): z.ZodType<T, unknown> {
  return z
    .unknown()
    .transform((input, context): T => {
      try {
        return read(input);
      } catch (error) {
        if (!(error instanceof InputError)) throw error;
        const { expected, wayOut } = error.fault;
        context.issues.push({ code: "custom", input, message: expected, params: { expected, wayOut } });
        return z.NEVER;
      }
    })
    .meta({ ...meta });
}

/** `"3.015 ± 0.006 cm3"` → Quantity in SI. A bare number is taken for a plain number only. */
export function quantity(dimension: Dimension, options: QuantityOptions): z.ZodType<Quantity, unknown> {
  return reading((input) => readQuantity(input, dimension, options), {
    type: dimension === "dimensionless" ? ["string", "number"] : "string",
    description: options.description,
    shown: [options.example ?? DIMENSIONS[dimension].example],
    dimension,
  });
}

/** A quantity, or the word that leaves it to the program. */
export function quantityOr<Word extends string>(
  word: Word,
  dimension: Dimension,
  options: QuantityOptions,
): z.ZodType<Quantity | Word, unknown> {
  return reading<Quantity | Word>(
    (input) => {
      if (input === word) return word;
      try {
        return readQuantity(input, dimension, options);
      } catch (error) {
        if (!(error instanceof InputError)) throw error;
        throw new InputError({ ...error.fault, expected: `${word}, or ${error.fault.expected}` });
      }
    },
    {
      type: dimension === "dimensionless" ? ["string", "number"] : "string",
      description: options.description,
      shown: [word, options.example ?? DIMENSIONS[dimension].example],
      dimension,
    },
  );
}

function readQuantity(input: unknown, dimension: Dimension, options: QuantityOptions): Quantity {
  const example = options.example ?? DIMENSIONS[dimension].example;
  const expected = expectedUnit(dimension);
  if (input === undefined || input === null) {
    throw new InputError({ expected, wayOut: `give ${DIMENSIONS[dimension].noun}, such as "${example}"` });
  }
  if (typeof input === "number" && dimension !== "dimensionless") {
    throw new InputError({ expected, wayOut: `add the unit, such as "${input} ${usualUnit(dimension)}"` });
  }
  if (typeof input !== "string" && typeof input !== "number") {
    throw new InputError({ expected, wayOut: `write one text, such as "${example}"` });
  }
  const read = parseQuantity(String(input), dimension);
  const bound =
    options.sign === "positive" && !(read.value > 0)
      ? "above 0"
      : options.sign === "not-negative" && !(read.value >= 0)
        ? "not below 0"
        : options.atMost !== undefined && read.value > options.atMost
          ? `at most ${options.atMost}${dimension === "dimensionless" ? "" : ` ${DIMENSIONS[dimension].si}`}`
          : undefined;
  if (bound !== undefined) {
    throw new InputError({ expected: `${expected}, ${bound}`, wayOut: `give a value such as "${example}"` });
  }
  return read;
}

/** A column of a table: its heading, or "#3" for the third column of a file without headings. */
export interface ValueColumn {
  readonly column: string;
  readonly unit: string;
  /** SI value = factor × number in the file. */
  readonly factor: number;
}

/** Headings for the examples that editors and messages show. */
const SYMBOL: Readonly<Partial<Record<Dimension, string>>> = {
  time: "t",
  temperature: "T",
  resistance: "R",
  current: "I",
  voltage: "V",
};

/** A heading, or a 1-based number for files without headings, kept as "#3". */
export function columnName(): z.ZodType<string, unknown> {
  return reading(
    (input) => {
      if (typeof input === "string" && input.trim() !== "") return input;
      if (typeof input === "number" && Number.isInteger(input) && input >= 1) return `#${input}`;
      throw new InputError({
        expected: "a column's heading, or its number from 1 on",
        wayOut:
          "write column: R for the column headed R, or column: 2 for the second of a file without headings",
      });
    },
    {
      type: ["string", "integer"],
      description: "Heading of the column, or its number from 1 on for a file without headings.",
      shown: ["R", 2],
    },
  );
}

/** `{ column: R, unit: kOhm }` → ValueColumn; with several dimensions, the unit tells which is meant. */
export function columnOf(
  dimensions: Dimension | readonly Dimension[],
  description: string,
): z.ZodType<ValueColumn, unknown> {
  const allowed = typeof dimensions === "string" ? [dimensions] : dimensions;
  const example = unitsOf(allowed[0]!)[0]!;
  const unit = reading(
    (input) => {
      const known = typeof input === "string" ? findUnit(input) : undefined;
      if (known !== undefined && allowed.includes(known.dimension)) return known;
      throw new InputError({
        expected: allowed.map(expectedUnit).join(", or "),
        wayOut:
          known !== undefined
            ? `${known.symbol} is the unit of ${DIMENSIONS[known.dimension].noun}; did you mean another column, or unit: ${usualUnit(allowed[0]!)}?`
            : typeof input === "string"
              ? unitFault(input, allowed[0]!).wayOut
              : `name the unit of the column's numbers, such as unit: ${example}`,
      });
    },
    {
      type: "string",
      enum: [...UNITS.values()]
        .filter((known) => allowed.includes(known.dimension))
        .map(({ symbol }) => symbol),
      description: "Unit of the numbers in the column.",
      shown: [example],
    },
  );
  return z
    .strictObject({ column: columnName(), unit })
    .transform(
      ({ column, unit: known }): ValueColumn => ({ column, unit: known.symbol, factor: known.factor }),
    )
    .meta({ description, shown: [`{ column: ${SYMBOL[allowed[0]!] ?? "x"}, unit: ${example} }`] });
}

/** Text that is not empty. Numbers are refused: 2026.10 would have lost its last digit already. */
export function text(options: Written): z.ZodType<string, unknown> {
  return reading(
    (input) => {
      if (typeof input === "string" && input.trim() !== "") return input;
      const example = options.example ?? "text";
      throw new InputError({
        expected: "text",
        wayOut:
          typeof input === "number" || typeof input === "boolean"
            ? `put it in quotes: "${input}"`
            : `write text, such as ${JSON.stringify(example)}`,
      });
    },
    { type: "string", minLength: 1, description: options.description, shown: [options.example] },
  );
}

const NAME = "^[\\p{L}\\p{N}][\\p{L}\\p{N}._+-]{0,79}$";
/** Device names that no Windows folder may bear, with or without an ending. */
const RESERVED = /^(con|prn|aux|nul|com\d|lpt\d)(\..*)?$/i;

/** A name that is also a file or folder name on every system. */
export function name(options: Written): z.ZodType<string, unknown> {
  const pattern = new RegExp(NAME, "u");
  return reading(
    (input) => {
      const sound =
        typeof input === "string" && pattern.test(input) && !RESERVED.test(input) && !input.endsWith(".");
      if (sound) return input;
      throw new InputError({
        expected:
          "a name that can be a file name: letters, digits, dot, hyphen, underscore, plus; 80 at most",
        wayOut:
          typeof input === "number"
            ? `put it in quotes: "${input}"`
            : `write a name such as ${options.example ?? "fjord-7"}`,
      });
    },
    {
      type: "string",
      pattern: NAME,
      description: options.description,
      shown: [options.example ?? "fjord-7"],
    },
  );
}

/** One of a few words; the first is the default. */
export function oneOf<const Words extends readonly [string, ...string[]]>(
  words: Words,
  description: string,
): z.ZodDefault<z.ZodEnum<{ [W in Words[number]]: W }>> {
  return z
    .enum(words)
    .default(words[0] as never)
    .meta({ description });
}
