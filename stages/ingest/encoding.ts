import { InputError } from "../errors.js";

/** Text or bytes of one log, whole or in pieces of any size; the pipeline opens the file. */
export type LogSource =
  | string
  | Uint8Array
  | AsyncIterable<Uint8Array | string>
  | Iterable<Uint8Array | string>;

export type Encoding = "utf-8" | "utf-16le" | "utf-16be" | "windows-1252";

/** So much of a log is looked at before reading starts. */
export const HEAD_BYTES = 65_536;

/** Share of even and of odd bytes that are NUL: plain text in UTF-16 has them on one side only. */
function nulShares(head: Uint8Array): { even: number; odd: number } {
  const n = Math.min(head.length & ~1, 2048);
  let even = 0;
  let odd = 0;
  for (let i = 0; i < n; i += 2) {
    if (head[i] === 0) even++;
    if (head[i + 1] === 0) odd++;
  }
  return { even: (2 * even) / Math.max(n, 1), odd: (2 * odd) / Math.max(n, 1) };
}

function isUtf8(head: Uint8Array): boolean {
  try {
    // stream: true lets the last character be cut by the end of the head.
    new TextDecoder("utf-8", { fatal: true }).decode(head, { stream: true });
    return true;
  } catch {
    return false;
  }
}

/**
 * Which encoding a log is in, from its first bytes: byte order mark, else NUL pattern, else valid UTF-8, else
 * the one-byte code page in which instruments write µ, ° and Ω-free headings.
 * @throws InputError if the bytes are no text
 */
export function sniffEncoding(head: Uint8Array, file: string): Encoding {
  if (head[0] === 0xff && head[1] === 0xfe) return "utf-16le";
  if (head[0] === 0xfe && head[1] === 0xff) return "utf-16be";
  const packed = (head[0] === 0x1f && head[1] === 0x8b) || (head[0] === 0x50 && head[1] === 0x4b);
  if (packed)
    throw new InputError({
      file,
      expected: "a text log, but this is a compressed file",
      wayOut: "unpack it and name the unpacked log",
    });
  const { even, odd } = nulShares(head);
  if (odd > 0.5 && even < 0.1) return "utf-16le";
  if (even > 0.5 && odd < 0.1) return "utf-16be";
  if (head.includes(0))
    throw new InputError({
      file,
      expected: "a text log, but this is a binary file",
      wayOut: "export the log as CSV text from the instrument and name that file",
    });
  return isUtf8(head) ? "utf-8" : "windows-1252";
}

function* single<T>(item: T): Generator<T> {
  yield item;
}

function joined(pieces: readonly Uint8Array[]): Uint8Array {
  const whole = new Uint8Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
  let at = 0;
  for (const piece of pieces) {
    whole.set(piece, at);
    at += piece.length;
  }
  return whole;
}

/**
 * The log as pieces of text, byte order mark removed.
 * @throws InputError if the bytes are no text
 */
export async function* textPieces(source: LogSource, file: string): AsyncGenerator<string> {
  const pieces = typeof source === "string" || source instanceof Uint8Array ? single(source) : source;
  let decoder: InstanceType<typeof TextDecoder> | null = null;
  let waiting: Uint8Array[] = [];
  let waitingBytes = 0;
  let start = true;
  for await (const piece of pieces) {
    if (typeof piece === "string") {
      yield start && piece.charCodeAt(0) === 0xfeff ? piece.slice(1) : piece;
      start = false;
      continue;
    }
    if (decoder !== null) {
      yield decoder.decode(piece, { stream: true });
      continue;
    }
    waiting.push(piece);
    waitingBytes += piece.length;
    if (waitingBytes < HEAD_BYTES) continue;
    const head = joined(waiting);
    waiting = [];
    decoder = new TextDecoder(sniffEncoding(head, file));
    yield decoder.decode(head, { stream: true });
  }
  if (decoder === null && waitingBytes > 0) {
    const head = joined(waiting);
    decoder = new TextDecoder(sniffEncoding(head, file));
    yield decoder.decode(head, { stream: true });
  }
  if (decoder !== null) yield decoder.decode();
}
