// Runs the benches named on the command line, or all: every `*.bench.mjs` beside this file.
//
// A bench is a module with
//   title                 what is measured
//   repeats               how often each case runs
//   prepare(folder)       writes its input into a fresh folder, returns what the cases need (plain data)
//   report()              instead of cases: a text of its own, for what is counted rather than timed
//   cases                 { name: async (input) => ({ rows?, bytes? }) }; the first is what the others are compared with
// Each run is a process of its own, so that one case's memory and warm code do not help or burden the next.
// A bench measures and never judges: there is no time that fails.
import { spawnSync } from "node:child_process";
import { mkdtempSync, readdirSync, rmSync } from "node:fs";
import { cpus, tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";

const here = dirname(fileURLToPath(import.meta.url));

function median(values) {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

function runOnce(path, name, input) {
  const done = spawnSync(process.execPath, [join(here, "one-case.mjs"), path, name], {
    input: JSON.stringify(input),
    encoding: "utf8",
    stdio: ["pipe", "pipe", "inherit"],
    maxBuffer: 1 << 26,
  });
  if (done.status !== 0) throw new Error(`${name} ended with code ${done.status}`);
  return JSON.parse(done.stdout);
}

function table(rows) {
  const widths = rows[0].map((_, column) => Math.max(...rows.map((row) => row[column].length)));
  return rows
    .map((row) =>
      row.map((cell, i) => (i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i]))).join("  "),
    )
    .join("\n");
}

const known = readdirSync(here)
  .filter((file) => file.endsWith(".bench.mjs"))
  .map((file) => file.slice(0, -".bench.mjs".length))
  .sort();
const asked = process.argv.slice(2);
const unknown = asked.filter((name) => !known.includes(name));
if (unknown.length > 0) {
  console.error(`no bench named ${unknown.join(", ")}; there are ${known.join(", ")}`);
  process.exit(2);
}

console.log(`Node ${process.version}, ${cpus().length} × ${cpus()[0]?.model ?? "processor"}`);
for (const name of asked.length > 0 ? asked : known) {
  const path = pathToFileURL(join(here, `${name}.bench.mjs`)).href;
  const bench = await import(path);
  if (bench.report !== undefined) {
    console.log(`\n${name}: ${bench.title}\n${await bench.report()}`);
    continue;
  }
  const folder = mkdtempSync(join(tmpdir(), "rotonwell-bench-"));
  try {
    const input = await bench.prepare(folder);
    console.log(`\n${name}: ${bench.title}`);
    const lines = [["", "median", "least", "ratio", "rows/s", "MB/s", "peak memory"]];
    let first = Number.NaN;
    for (const title of Object.keys(bench.cases)) {
      const runs = Array.from({ length: bench.repeats }, () => runOnce(path, title, input));
      const seconds = median(runs.map((run) => run.seconds));
      if (Number.isNaN(first)) first = seconds;
      const { rows, bytes } = runs[0];
      lines.push([
        title,
        `${seconds.toFixed(3)} s`,
        `${Math.min(...runs.map((run) => run.seconds)).toFixed(3)} s`,
        (seconds / first).toFixed(2),
        rows === undefined ? "" : Math.round(rows / seconds).toLocaleString("en"),
        bytes === undefined ? "" : Math.round(bytes / seconds / 1e6).toString(),
        `${Math.round(median(runs.map((run) => run.peakMB)))} MB`,
      ]);
    }
    console.log(table(lines));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
