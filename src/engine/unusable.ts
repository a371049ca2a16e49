import { stat } from "node:fs/promises";
import { packedWith } from "./compression.ts";

/** The log is there but cannot be used: exit status 3. The message is for the user, cause and remedy included. */
export class UnusableLog extends Error {
  override readonly name = "UnusableLog";
}

/** Of a file whose compression cannot be read to the end: it is damaged, or it is not what its name says. */
export async function notWhole(name: string, path: string): Promise<UnusableLog> {
  const { size } = await stat(path);
  const packed = await packedWith(path);
  const plain = name.replace(/\.(gz|zst)$/i, "");
  const ending = packed === "gzip" ? ".gz" : ".zst";
  if (size > 0 && packed === null)
    return new UnusableLog(
      `${name} does not begin as packed files do: it is damaged, or not packed at all. Fetch it again, or call it ${plain}.`,
    );
  if (packed !== null && !name.toLowerCase().endsWith(ending))
    return new UnusableLog(`${name} is packed with ${packed}, whatever its name says. Call it ${plain}${ending}.`);
  return new UnusableLog(
    `${name} ends early or is damaged: its compression cannot be read to the end. Fetch the file again.`,
  );
}

/** What an engine's error says, without its kind and its hints, and with a file called by its name in the plan and not by its path. */
export function firstLine(cause: unknown, path: string, name: string): string {
  const message = cause instanceof Error ? (cause.message.split("\n")[0] ?? "") : String(cause);
  return message.replace(/^[A-Z][A-Za-z ]* Error: /, "").replaceAll(path, name);
}

/** What an engine says when it may use too little memory: no file is to blame. @param memory what it may use, as it was given */
export function outOfMemory(cause: unknown, memory: string | undefined): unknown {
  if (!(cause instanceof Error) || !/^Out of Memory Error/.test(cause.message)) return cause;
  const allowed = memory === undefined ? "this machine has for it" : `the ${memory} that it may use`;
  return new UnusableLog(
    `The engine needs more memory than ${allowed}. Give it more, such as --memory 2GB, or fewer --threads.`,
    { cause },
  );
}
