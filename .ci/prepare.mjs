// Makes a fresh clone ready: installs what package-lock.json names, then compiles. Does nothing that is already done.
import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

const root = dirname(dirname(fileURLToPath(import.meta.url)));

function run(command, args) {
  const done = spawnSync(command, args, { cwd: root, stdio: ["ignore", process.stderr, process.stderr] });
  if (done.error) throw done.error;
  if (done.status !== 0) {
    console.error(`${command} ${args.join(" ")} ended with code ${done.status}`);
    process.exit(done.status ?? 1);
  }
}

function filesBelow(folder) {
  return readdirSync(join(root, folder), { withFileTypes: true })
    .flatMap((entry) => {
      const path = join(folder, entry.name);
      return entry.isDirectory() ? filesBelow(path) : [path];
    })
    .sort();
}

function digest(files) {
  const hash = createHash("sha256");
  for (const file of files)
    hash
      .update(file)
      .update("\0")
      .update(readFileSync(join(root, file)))
      .update("\0");
  return hash.digest("hex");
}

function stampIs(path, value) {
  return existsSync(join(root, path)) && readFileSync(join(root, path), "utf8") === value;
}

const installed = "node_modules/.rotonwell-installed";
const wanted = digest(["package-lock.json"]);
if (!stampIs(installed, wanted)) {
  console.error("installing packages …");
  run("npm", ["ci", "--no-audit", "--no-fund"]);
  writeFileSync(join(root, installed), wanted);
}

const built = "dist/.built-from";
const sources = digest([
  ...filesBelow("pipeline"),
  ...filesBelow("stages"),
  "package.json",
  "tsconfig.json",
  "tsconfig.build.json",
]);
if (!stampIs(built, sources)) {
  console.error("compiling …");
  rmSync(join(root, "dist"), { recursive: true, force: true });
  run(process.execPath, [join(root, "node_modules/typescript/bin/tsc"), "-p", "tsconfig.build.json"]);
  run(process.execPath, [join(root, "dist/pipeline/config/write-schemas.js"), join(root, "dist/schemas")]);
  writeFileSync(join(root, built), sources);
}
