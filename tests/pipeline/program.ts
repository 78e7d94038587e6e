import { spawnSync } from "node:child_process";
import { cpSync, existsSync, mkdirSync, mkdtempSync, symlinkSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";

export const ROOT = resolve(import.meta.dirname, "../..");

export interface Outcome {
  readonly code: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** The built program in a process of its own, as a user runs it. */
export function rotonwell(
  args: readonly string[],
  options: { cwd?: string; env?: Record<string, string> } = {},
): Outcome {
  const main = join(ROOT, "dist/pipeline/cli/main.js");
  if (!existsSync(main)) throw new Error("the program is not built: npm run build");
  const done = spawnSync(process.execPath, [main, ...args], {
    encoding: "utf8",
    cwd: options.cwd ?? ROOT,
    env: { ...process.env, ...options.env },
    maxBuffer: 1 << 28,
  });
  return { code: done.status, stdout: done.stdout, stderr: done.stderr };
}

export function freshFolder(): string {
  return mkdtempSync(join(tmpdir(), "rotonwell-test-"));
}

/** The demo campaign in a folder of its own, results and all. */
export function demoCopy(): { folder: string; campaign: string; out: string } {
  const folder = freshFolder();
  mkdirSync(join(folder, "fixtures"));
  cpSync(join(ROOT, "configs"), join(folder, "configs"), { recursive: true });
  cpSync(join(ROOT, "fixtures/nights"), join(folder, "fixtures/nights"), { recursive: true });
  symlinkSync(join(ROOT, "dist"), join(folder, "dist"));
  return {
    folder,
    campaign: join(folder, "configs/campaigns/fjord-7.yaml"),
    out: join(folder, "out/fjord-7"),
  };
}
