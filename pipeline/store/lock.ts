import { mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { hostname } from "node:os";
import { join } from "node:path";
import lockfile from "proper-lockfile";

/** Another process works in this folder: exit code 75. */
export class Busy extends Error {
  override readonly name = "Busy";
}

interface Owner {
  readonly pid: number;
  readonly host: string;
}

function alive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === "EPERM";
  }
}

function readOwner(path: string): Owner | null {
  try {
    return JSON.parse(readFileSync(path, "utf8")) as Owner;
  } catch {
    // No owner file, or one cut short by a crash: the lock's own age decides.
    return null;
  }
}

/**
 * Runs `work` as the only process in `folder`. A lock left by a process of this machine that is gone is taken over
 * at once; one from another machine when it has not been refreshed for a minute.
 * @throws Busy
 */
export async function withLock<T>(folder: string, work: () => Promise<T>): Promise<T> {
  mkdirSync(folder, { recursive: true });
  const lockfilePath = join(folder, ".lock");
  const ownerPath = join(folder, ".lock-owner.json");
  const take = () => lockfile.lock(folder, { lockfilePath, stale: 60_000, update: 10_000, retries: 0 });
  let release: () => Promise<void>;
  try {
    release = await take();
  } catch (error) {
    if ((error as { code?: string }).code !== "ELOCKED") throw error;
    const owner = readOwner(ownerPath);
    if (owner === null || owner.host !== hostname() || alive(owner.pid)) {
      const who = owner === null ? "another process" : `process ${owner.pid} on ${owner.host}`;
      throw new Busy(`${folder}: ${who} is working on this campaign; nothing was done.`);
    }
    rmSync(lockfilePath, { recursive: true, force: true });
    release = await take();
  }
  writeFileSync(ownerPath, JSON.stringify({ pid: process.pid, host: hostname() }));
  try {
    return await work();
  } finally {
    rmSync(ownerPath, { force: true });
    await release();
  }
}
