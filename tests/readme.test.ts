import { cpSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { expect, test } from "vitest";
import { keyTable } from "../pipeline/config/key-table.js";
import { demoCopy, freshFolder, ROOT, rotonwell } from "./pipeline/program.js";

const README = readFileSync(join(ROOT, "README.md"), "utf8");

test("the reference tables are those of the schemas", () => {
  for (const kind of ["campaign", "cell", "sample", "thermometer", "run"] as const) {
    expect(README).toContain(keyTable(kind).trimEnd());
  }
});

test("the printed result is what the program prints", () => {
  const demo = demoCopy();
  const printed = rotonwell(["nightly", demo.campaign]);
  expect(printed.code).toBe(0);
  const lines = printed.stdout
    .split("\n")
    .filter((line) => line.trim() !== "" && !line.startsWith("report "));
  for (const line of lines) expect(README).toContain(line);
});

test("the configuration shown runs", () => {
  const folder = freshFolder();
  for (const [, file, content] of README.matchAll(/```yaml\n# (\S+\.yaml)\n([\s\S]*?)```/g)) {
    mkdirSync(dirname(join(folder, file!)), { recursive: true });
    writeFileSync(join(folder, file!), content!);
  }
  const nights = join(ROOT, "fixtures/nights");
  cpSync(join(nights, "thimble-empty"), join(folder, "nights/thimble-empty"), { recursive: true });
  const shown = join(folder, "nights/fjord-7/2026-11-14-a");
  const kept = readFileSync(join(shown, "run.yaml"));
  cpSync(join(nights, "fjord-7"), join(folder, "nights/fjord-7"), { recursive: true });
  writeFileSync(join(shown, "run.yaml"), kept);
  cpSync(join(ROOT, "configs/thermometers/ge-31.csv"), join(folder, "ge-31.csv"));
  const outcome = rotonwell(["nightly", join(folder, "campaign.yaml")]);
  expect(outcome.stderr).not.toContain("expected");
  expect(outcome.code).toBe(0);
  rmSync(folder, { recursive: true });
});
