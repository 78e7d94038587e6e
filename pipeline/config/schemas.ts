import { z } from "zod";
import { runSchema } from "../../stages/ingest/config.js";
import { cellSchema, sampleSchema } from "../../stages/molar/config.js";
import { scenarioSchema } from "../../stages/simulate/config.js";
import { thermometerSchema } from "../../stages/thermometry/config.js";
import { campaignSchema } from "./campaign-schema.js";
import type { Kind } from "./kind.js";

/** The parts of JSON Schema that our schemas use. */
export interface JsonSchema {
  readonly $schema?: string;
  readonly title?: string;
  readonly type?: string | readonly string[];
  readonly description?: string;
  readonly properties?: Readonly<Record<string, JsonSchema>>;
  readonly required?: readonly string[];
  readonly additionalProperties?: boolean;
  readonly items?: JsonSchema;
  readonly prefixItems?: readonly JsonSchema[];
  readonly anyOf?: readonly JsonSchema[];
  readonly oneOf?: readonly JsonSchema[];
  readonly enum?: readonly unknown[];
  readonly const?: unknown;
  readonly default?: unknown;
  readonly examples?: readonly unknown[];
  readonly pattern?: string;
  readonly minimum?: number;
  readonly maximum?: number;
  readonly minItems?: number;
  readonly minLength?: number;
}

const SCHEMAS = {
  campaign: campaignSchema,
  cell: cellSchema,
  sample: sampleSchema,
  thermometer: thermometerSchema,
  run: runSchema,
  scenario: scenarioSchema,
} as const;

export type SchemaOf<K extends Kind> = (typeof SCHEMAS)[K];

/** The schema that files of a kind are read by. */
export function schemaOf(kind: Kind): z.ZodType {
  return SCHEMAS[kind];
}

/** What stages/quantities/schema.ts puts into a schema's metadata. */
interface Shown {
  readonly shown?: readonly unknown[];
  readonly dimension?: string;
  maximum?: number;
}

/** JSON Schema (2020-12) of a kind of file as a person writes it: quantities are texts, defaults optional. */
export function jsonSchema(kind: Kind): JsonSchema {
  const schema = z.toJSONSchema(schemaOf(kind), {
    io: "input",
    reused: "inline",
    override: ({ jsonSchema: node }) => {
      // zod drops `examples` where a value is transformed on reading; our schemas keep them under `shown`.
      const { shown, dimension: _, ...rest } = node as Shown;
      // The largest safe integer is a bound of the computer, not of the key.
      if (rest.maximum === Number.MAX_SAFE_INTEGER) delete rest.maximum;
      for (const key of Object.keys(node)) delete node[key as keyof typeof node];
      Object.assign(node, rest, shown === undefined ? {} : { examples: shown });
    },
  }) as JsonSchema;
  return { ...schema, title: `rotonwell ${kind}` };
}
