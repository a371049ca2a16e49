import { basename, dirname } from "node:path";

const REASONS: Readonly<Record<string, string>> = {
  ENOENT: "there is no such folder, and none can be made",
  EACCES: "you do not have the right to",
  EPERM: "you do not have the right to",
  EROFS: "it can only be read",
  ENOTDIR: "a part of this path is a file, not a folder",
  EEXIST: "a file is there, and a folder is needed",
  EISDIR: "a folder is there, and a file is needed",
  ENAMETOOLONG: "the name is too long",
  ENOSPC: "the disk is full",
  EFBIG: "files may not be that large",
  EDQUOT: "your share of the disk is full",
};
const WRITING = ["mkdir", "mkdtemp", "open", "write", "rename", "copyfile"];

/** Where a file could not be written or opened: the user's to mend, not a fault of ours. Null for any other error. */
export function unwritableText(error: unknown): string | null {
  if (!(error instanceof Error)) return null;
  const { code = "", syscall = "", path: given = "a file" } = error as NodeJS.ErrnoException;
  // The folder that a run prepares its files in is ours; the user's is the one around it.
  const path = /^\.closeout-/.test(basename(given)) ? dirname(given) : given;
  const reason = REASONS[code];
  if (reason === undefined || !WRITING.includes(syscall)) return null;
  // A file of the log is opened too, so that only the others are surely about the place of the results.
  return syscall === "open"
    ? `${path} cannot be opened: ${code === "ENOENT" ? "there is no such folder, or file" : reason}.`
    : `${path} cannot be written: ${reason}. Name another folder.`;
}
