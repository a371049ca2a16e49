import { readFileSync } from "node:fs";

const found = JSON.parse(readFileSync(new URL("../package.json", import.meta.url), "utf8")) as { version: string };

/** This program's version, from its package. */
export const version: string = found.version;
