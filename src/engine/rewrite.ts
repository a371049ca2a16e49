import { createWriteStream } from "node:fs";
import path from "node:path";
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { textOf } from "./compression.ts";
import { delimiterOf, quoted, records } from "./records.ts";
import type { FileGroup } from "./source.ts";

/**
 * A group whose files the engine's reader refuses as a whole, such as a file that mixes line ends, written anew in one
 * form: every record on LF, every cell in quotes. A record that cannot be read stays one: it gets a wrong number of cells,
 * and is rejected and counted like any other.
 */
export async function rewritten(group: FileGroup, workFolder: string): Promise<FileGroup> {
  const delimiter = delimiterOf(group.format);
  const files: { index: number; path: string }[] = [];
  for (const file of group.files) {
    const to = path.join(workFolder, `rewritten-${file.index}.${group.format}`);
    await pipeline(Readable.from(lines(file.path, delimiter, group.columns.length)), createWriteStream(to));
    files.push({ index: file.index, path: to });
  }
  return { ...group, files, skip: 0 };
}

async function* lines(file: string, delimiter: string, width: number): AsyncGenerator<string> {
  let block = "";
  for await (const record of records(textOf(file), delimiter)) {
    const cells = record.cells ?? Array.from({ length: width + 1 }, () => record.text);
    block += `${cells.map(quoted).join(delimiter)}\n`;
    if (block.length > BLOCK) {
      yield block;
      block = "";
    }
  }
  yield block;
}
const BLOCK = 1 << 18;
