import { createReadStream } from "node:fs";
import { open, stat } from "node:fs/promises";
import { pipeline } from "node:stream";
import { createGunzip } from "node:zlib";
import { Decompress } from "fzstd";

/** Files as they stand on disk, plain or compressed, as bytes and as text. */

const PIECE = 1 << 20;

/** The text of a file in pieces, decompressed by its ending. @throws when a compressed file ends early or is damaged */
export async function* textOf(file: string): AsyncGenerator<string> {
  const decoder = new TextDecoder("utf-8", { ignoreBOM: true });
  for await (const bytes of contentOf(file)) yield decoder.decode(bytes, { stream: true });
  yield decoder.decode();
}

/** The bytes of a file in pieces, decompressed by its ending. */
export async function* contentOf(file: string): AsyncGenerator<Uint8Array> {
  if (/\.gz$/i.test(file)) yield* gunzipped(file);
  else if (/\.zst$/i.test(file)) yield* zstandard(bytesOf(file));
  else yield* bytesOf(file);
}

const bytesOf = (file: string) => createReadStream(file, { highWaterMark: PIECE }) as AsyncIterable<Buffer>;

/** A pipeline and no bare pipe: what goes wrong with the file is met where the pieces are taken. */
function gunzipped(file: string): AsyncIterable<Buffer> {
  const gunzip = createGunzip({ chunkSize: PIECE });
  return pipeline(createReadStream(file, { highWaterMark: PIECE }), gunzip, () => undefined);
}

async function* zstandard(pieces: AsyncIterable<Uint8Array>): AsyncGenerator<Uint8Array> {
  const ready: Uint8Array[] = [];
  const stream = new Decompress((piece) => void ready.push(piece));
  for await (const piece of pieces) {
    stream.push(piece);
    yield* ready.splice(0);
  }
  // It keeps frames of a few bytes back until it knows that nothing follows.
  stream.push(new Uint8Array(0), true);
  yield* ready;
}

/** How a file is packed by its first bytes, whatever it is called; null for one that is not, or is empty. */
export async function packedWith(file: string): Promise<"gzip" | "Zstandard" | null> {
  const handle = await open(file);
  try {
    const { buffer, bytesRead } = await handle.read(Buffer.alloc(4), 0, 4, 0);
    if (bytesRead >= 2 && buffer.readUInt16LE(0) === 0x8b1f) return "gzip";
    return bytesRead === 4 && buffer.readUInt32LE(0) === 0xfd2fb528 ? "Zstandard" : null;
  } finally {
    await handle.close();
  }
}

/**
 * Whether a compressed file is whole; null for a plain one. Engines read half a file without a word.
 * gzip is decompressed, for its end cannot be told otherwise, and `also` is shown each piece of it; of Zstandard only the
 * block headers are read.
 */
export async function isWhole(file: string, also: (piece: Uint8Array) => void = () => {}): Promise<boolean | null> {
  if (!/\.(gz|zst)$/i.test(file)) return null;
  // Not even an empty text packs to no bytes at all.
  if ((await stat(file)).size === 0) return false;
  return /\.gz$/i.test(file) ? isWholeGzip(file, also) : isWholeZstandard(bytesOf(file));
}

async function isWholeGzip(file: string, also: (piece: Uint8Array) => void): Promise<boolean> {
  try {
    for await (const piece of gunzipped(file)) also(piece);
    return true;
  } catch (error) {
    // Z_BUF_ERROR, Z_DATA_ERROR: what is packed is at fault, and not the reading of the file.
    if (String((error as NodeJS.ErrnoException).code).startsWith("Z_")) return false;
    throw error;
  }
}

/** RFC 8878, section 3.1.1: frames of a header, blocks up to the one marked last, and an optional checksum. */
async function isWholeZstandard(pieces: AsyncIterable<Buffer>): Promise<boolean> {
  const take = reader(pieces);
  for (;;) {
    const magic = await take(4);
    if (magic === "end") return true;
    if (magic === null) return false;
    const number = magic.readUInt32LE(0);
    if (number >= 0x184d2a50 && number <= 0x184d2a5f) {
      const size = await take(4);
      if (size === null || size === "end" || !isBytes(await take(size.readUInt32LE(0), true))) return false;
      continue;
    }
    if (number !== 0xfd2fb528) return false;
    if (!(await isWholeFrame(take))) return false;
  }
}

type Take = (bytes: number, skip?: boolean) => Promise<Buffer | "end" | null>;

async function isWholeFrame(take: Take): Promise<boolean> {
  const descriptor = await take(1);
  if (!isBytes(descriptor)) return false;
  const flags = descriptor.readUInt8(0);
  const isSingle = (flags & 0x20) !== 0;
  const dictionary = [0, 1, 2, 4][flags & 3] ?? 0;
  const content = [isSingle ? 1 : 0, 2, 4, 8][flags >> 6] ?? 0;
  if (!isBytes(await take((isSingle ? 0 : 1) + dictionary + content, true))) return false;
  for (;;) {
    const header = await take(3);
    if (!isBytes(header)) return false;
    const word = header.readUIntLE(0, 3);
    const isRun = ((word >> 1) & 3) === 1;
    if (!isBytes(await take(isRun ? 1 : word >> 3, true))) return false;
    if ((word & 1) === 1) break;
  }
  return (flags & 4) === 0 || isBytes(await take(4, true));
}

const isBytes = (found: Buffer | "end" | null): found is Buffer => found !== null && found !== "end";
const NOTHING = Buffer.alloc(0);

/** Takes so many bytes: "end" when none is left, null when some are missing; skipped bytes are not kept. */
function reader(pieces: AsyncIterable<Buffer>): Take {
  const source = pieces[Symbol.asyncIterator]();
  let piece: Buffer = NOTHING;
  let at = 0;
  return async (bytes, skip = false) => {
    const kept: Buffer[] = [];
    let missing = bytes;
    while (missing > 0) {
      if (at === piece.length) {
        const next = await source.next();
        if (next.done === true) return missing === bytes ? "end" : null;
        piece = next.value;
        at = 0;
      }
      const some = Math.min(missing, piece.length - at);
      if (!skip) kept.push(piece.subarray(at, at + some));
      at += some;
      missing -= some;
    }
    return kept.length === 1 ? (kept[0] ?? NOTHING) : Buffer.concat(kept);
  };
}
