import { expect, test } from "vitest";
import { sniffEncoding } from "../../../stages/ingest/encoding.js";
import { nightOf } from "./night-of.js";

const text = "t,Rµ,Tstage\n0.0,100.5,0.35\n0.1,101.5,0.36\n";
const resistance = { column: "Rµ", unit: "Ohm", factor: 1 };

function swapped(bytes: Buffer): Buffer {
  return Buffer.from(bytes).swap16();
}
const utf16 = Buffer.from(text, "utf16le");

const encodings: readonly (readonly [string, Uint8Array])[] = [
  ["utf-8", Buffer.from(text)],
  ["utf-8", Buffer.concat([Uint8Array.of(0xef, 0xbb, 0xbf), Buffer.from(text)])],
  ["utf-16le", Buffer.concat([Uint8Array.of(0xff, 0xfe), utf16])],
  ["utf-16be", Buffer.concat([Uint8Array.of(0xfe, 0xff), swapped(utf16)])],
  ["utf-16le", utf16],
  ["utf-16be", swapped(utf16)],
  ["windows-1252", Buffer.from(text, "latin1")],
];

test.each(encodings)("%s, whole and byte by byte", async (encoding, bytes) => {
  expect(sniffEncoding(bytes, "log.csv")).toBe(encoding);
  const whole = await nightOf({ thermometer: bytes, resistance });
  expect([...whole.thermometer.resistance_Ohm]).toEqual([100.5, 101.5]);
  const pieces = Array.from(bytes, (byte) => Uint8Array.of(byte));
  expect(await nightOf({ thermometer: pieces, resistance })).toEqual(whole);
});

test("a byte order mark in front of a text is no part of its heading", async () => {
  const night = await nightOf({ thermometer: `\ufeff${text}`, resistance });
  expect(night.thermometer.time_s[1]).toBe(0.1);
});
