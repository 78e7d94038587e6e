// Runs one case of one bench and prints what it took. Called by main.mjs, once a run.
import { text } from "node:stream/consumers";

const [path, name] = process.argv.slice(2);
const input = JSON.parse(await text(process.stdin));
const { cases } = await import(path);
const start = performance.now();
// A case that runs the program in a process of its own says that one's peak.
const { rows, bytes, peakMB } = await cases[name](input);
const seconds = (performance.now() - start) / 1000;
// maxRSS is in kilobytes.
console.log(
  JSON.stringify({ seconds, rows, bytes, peakMB: peakMB ?? process.resourceUsage().maxRSS / 1024 }),
);
