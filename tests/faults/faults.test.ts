import { spawn } from "node:child_process";
import { createHash } from "node:crypto";
import { cpSync, existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { expect, test } from "vitest";
import { demoCopy, freshFolder, ROOT, rotonwell } from "../pipeline/program.js";

function bytesBelow(folder: string): Map<string, string> {
  const names = readdirSync(folder, { recursive: true, encoding: "utf8" }).sort();
  const files = names.filter((name) => statSync(join(folder, name)).isFile());
  return new Map(
    files.map((name) => [
      name,
      createHash("sha256")
        .update(readFileSync(join(folder, name)))
        .digest("hex"),
    ]),
  );
}

test("killed at five moments, the next run ends as if nothing had happened", async () => {
  const calm = demoCopy();
  expect(rotonwell(["nightly", calm.campaign]).code).toBe(0);
  const expected = bytesBelow(calm.out);
  const demo = demoCopy();
  for (const wait_ms of [250, 450, 650, 900, 1200]) {
    const child = spawn(process.execPath, [
      join(ROOT, "dist/pipeline/cli/main.js"),
      "nightly",
      demo.campaign,
    ]);
    await new Promise((resolve) => setTimeout(resolve, wait_ms));
    child.kill("SIGKILL");
    await new Promise((resolve) =>
      child.exitCode === null && child.signalCode === null ? child.on("exit", resolve) : resolve(null),
    );
  }
  expect(rotonwell(["nightly", demo.campaign]).code).toBe(0);
  const found = bytesBelow(demo.out);
  // A file cut short under its temporary name may be left; no file of ours may differ or be missing.
  for (const [name, digest] of expected) expect(found.get(name), name).toBe(digest);
});

test("two at once: one works, the other says so and exits with 75", async () => {
  const demo = demoCopy();
  const main = join(ROOT, "dist/pipeline/cli/main.js");
  const codes = await Promise.all(
    [0, 1, 2].map(
      () =>
        new Promise<{ code: number | null; words: string }>((resolve) => {
          const child = spawn(process.execPath, [main, "nightly", demo.campaign]);
          let words = "";
          child.stderr.on("data", (piece: Buffer) => {
            words += String(piece);
          });
          child.on("exit", (code) => resolve({ code, words }));
        }),
    ),
  );
  expect(codes.map(({ code }) => code).sort()).toEqual([0, 75, 75]);
  for (const { code, words } of codes) if (code === 75) expect(words).toMatch(/working on this campaign/);
});

// Root may write anywhere, so a file where the folder should be stands for the missing permission.
test("an output that cannot be written is said, with code 2", () => {
  const demo = demoCopy();
  mkdirSync(join(demo.folder, "out"));
  writeFileSync(demo.out, "in the way");
  const { code, stderr } = rotonwell(["nightly", demo.campaign]);
  expect(stderr).toMatch(/Way out: /);
  expect(code).toBe(2);
});

const NIGHT = "fixtures/nights/fjord-7/2026-11-14-a";

/** The demo with one night's files edited. */
function edited(edit: (folder: string) => void) {
  const demo = demoCopy();
  edit(join(demo.folder, NIGHT));
  return demo;
}
const change = (file: string, how: (text: string) => string) => (folder: string) => {
  const path = join(folder, file);
  writeFileSync(path, how(readFileSync(path, "utf8")));
};
const line = (text: string, n: number, how: (row: string) => string) =>
  text
    .split("\n")
    .map((row, i) => (i === n - 1 ? how(row) : row))
    .join("\n");

test.each<[string, (folder: string) => void, RegExp]>([
  [
    "word among numbers",
    change("thermometer.csv", (t) => line(t, 1204, (r) => r.replace(/,[^,]*$/, ",OVLD"))),
    /thermometer\.csv:1204: R is "OVLD"/,
  ],
  ["heading misspelt", change("thermometer.csv", (t) => line(t, 1, () => "time,R")), /thermometer\.csv/],
  ["heading only", change("thermometer.csv", () => "t,R\n"), /thermometer\.csv/],
  ["nothing at all", change("thermometer.csv", () => ""), /thermometer\.csv/],
  [
    "a picture",
    (f) => writeFileSync(join(f, "thermometer.csv"), Buffer.from([0x89, 0x50, 0x4e, 0x47, 0, 1, 2, 3, 0, 0])),
    /thermometer\.csv/,
  ],
  ["stray quote", change("thermometer.csv", (t) => line(t, 300, (r) => `"${r}`)), /thermometer\.csv:300/],
  [
    "clock set back",
    change("thermometer.csv", (t) => `${t}${t.split("\n").slice(1).join("\n")}`),
    /thermometer\.csv/,
  ],
  [
    "thousands separators",
    change("heater.csv", (t) => line(t, 5, (r) => r.replace(/^[^,]*/, "1'200.0"))),
    /heater\.csv:5/,
  ],
  [
    "negative duration",
    change("heater.csv", (t) => line(t, 4, (r) => r.replace(/^([^,]*),[^,]*/, "$1,-30"))),
    /heater\.csv:4/,
  ],
  [
    "unit of another dimension",
    change("run.yaml", (t) => t.replace("unit: Ohm", "unit: mV")),
    /run\.yaml:\d+: .*unit is "mV"/,
  ],
  ["unknown key", change("run.yaml", (t) => `${t}vetoes: []\n`), /did you mean|veto/i],
  [
    "log that is not there",
    change("run.yaml", (t) => t.replace("file: heater.csv", "file: heatr.csv")),
    /heatr\.csv/,
  ],
  ["no YAML", change("run.yaml", () => "run: [\n"), /run\.yaml/],
  ["wrong delimiter", change("run.yaml", (t) => `${t}format: { delimiter: ";" }\n`), /thermometer\.csv/],
  [
    "absolute and relative clocks",
    change("run.yaml", (t) => t.replace("time: { column: t, unit: s }", "time: { column: t, unit: epoch }")),
    /logs\.heater\.time\.unit is "s"; expected dates or Unix time/,
  ],
])("a broken night is refused with one message, and nothing is half-written: %s", (_name, edit, words) => {
  const demo = edited(edit);
  const raw = join(demo.folder, "fixtures");
  const before = bytesBelow(raw);
  const { code, stderr } = rotonwell(["nightly", demo.campaign, "--quiet"]);
  expect(stderr).toMatch(words);
  expect(stderr).toMatch(/expected /);
  expect(stderr).toMatch(/Way out: /);
  expect(stderr).not.toMatch(/\n {4}at /);
  expect(code).toBe(2);
  expect(existsSync(join(demo.out, "dataset"))).toBe(false);
  expect(existsSync(join(demo.out, "report"))).toBe(false);
  expect(bytesBelow(raw)).toEqual(before);
});

test("logs as other instruments write them give the same heat capacities", () => {
  const cell = join(ROOT, "configs/cells/thimble.yaml");
  const reduce = (folder: string) => {
    const outcome = rotonwell(["reduce", join(folder, "run.yaml"), "--cell", cell]);
    expect(outcome.stderr).not.toContain("expected");
    return outcome.stdout;
  };
  const plain = join(freshFolder(), "plain");
  cpSync(join(ROOT, NIGHT), plain, { recursive: true });
  const other = join(freshFolder(), "other");
  cpSync(join(ROOT, NIGHT), other, { recursive: true });
  // BOM, CRLF, chatter before the heading, tabs, quoted headings, and a last line cut short.
  change("thermometer.csv", (t) => {
    const rows = t
      .trimEnd()
      .split("\n")
      .map((row) => row.replaceAll(",", "\t"));
    rows[0] = rows[0]!
      .split("\t")
      .map((name) => `"${name}"`)
      .join("\t");
    return `\ufeff# bridge 3\r\n${rows.join("\r\n")}\r\n14600.0\t12`;
  })(other);
  expect(reduce(other)).toBe(reduce(plain));
});
