import { expect, test } from "vitest";
import { keyTable } from "../../../pipeline/config/key-table.js";
import { KINDS } from "../../../pipeline/config/kind.js";
import { type JsonSchema, jsonSchema } from "../../../pipeline/config/schemas.js";

function at(schema: JsonSchema, ...keys: string[]): JsonSchema {
  return keys.reduce((node, key) => node.properties![key]!, schema);
}

/** Every block of keys in a schema, with its dotted place. */
function blocks(schema: JsonSchema, place: string): { place: string; schema: JsonSchema }[] {
  const here = schema.properties === undefined ? [] : [{ place, schema }];
  const children = [
    ...Object.entries(schema.properties ?? {}).map(([key, child]) => ({ key: `.${key}`, child })),
    ...(schema.oneOf ?? []).map((child, i) => ({ key: `(${i})`, child })),
    ...(schema.items === undefined ? [] : [{ key: "[]", child: schema.items }]),
  ];
  return [...here, ...children.flatMap(({ key, child }) => blocks(child, place + key))];
}

test("required keys are marked", () => {
  expect(jsonSchema("cell").required).toEqual(["cell", "volume", "thermometer"]);
  expect(jsonSchema("campaign").required).toEqual(["campaign", "cell", "sample", "runs"]);
  expect(jsonSchema("run").required).toEqual(["run", "logs"]);
  expect(jsonSchema("sample").required).toEqual(["sample", "substance", "condition"]);
  expect(jsonSchema("thermometer").required).toEqual(["thermometer", "scale", "calibration"]);
});

test("a quantity is text with a meaning and an example; its default is as written", () => {
  expect(at(jsonSchema("cell"), "volume")).toEqual({
    type: "string",
    description: "Volume open to the helium when cold.",
    examples: ["3.015 ± 0.006 cm3"],
  });
  expect(at(jsonSchema("cell"), "heater", "lead_share")).toMatchObject({
    type: ["string", "number"],
    default: "0.5",
  });
  expect(at(jsonSchema("campaign"), "reduction", "separate", "window").default).toEqual(["0.35 K", "1.15 K"]);
});

test.each(KINDS)("%s: every key has a meaning, and no block takes unknown ones", (kind) => {
  const all = blocks(jsonSchema(kind), kind);
  expect(all.length).toBeGreaterThan(0);
  const open = all.filter(({ schema }) => schema.additionalProperties !== false).map(({ place }) => place);
  expect(open).toEqual([]);
  const silent = all.flatMap(({ place, schema }) =>
    Object.entries(schema.properties!)
      .filter(([, child]) => child.description === undefined)
      .map(([key]) => `${place}.${key}`),
  );
  expect(silent).toEqual([]);
});

test("a column's unit is one of its dimension", () => {
  const unit = at(jsonSchema("run"), "logs", "thermometer", "resistance", "unit");
  expect(unit.enum).toContain("kΩ");
  expect(unit.enum).not.toContain("mA");
});

test("the table of keys for the reference", () => {
  const lines = keyTable("run").split("\n");
  expect(lines[0]).toBe("| key | value | default | meaning |");
  expect(lines).toContain(
    "| `veto[].keep` | true or false | `false` | true uses the pulse in spite of its flags, instead of leaving it out. |",
  );
  expect(lines).toContain(
    "| `logs.heater.duration` | `{ column: t, unit: s }` | required | Column with the length of each pulse. (kind: events) |",
  );
  expect(lines.filter((line) => line.startsWith("| `logs.heater.current` "))).toHaveLength(1);
});
