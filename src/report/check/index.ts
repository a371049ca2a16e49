import { renderBlind } from "../render.ts";
import { blindJson } from "./json.ts";
import { blindPage } from "./page.ts";
import { blindTerminal } from "./terminal.ts";
import type { BlindInputs, BlindJson } from "./types.ts";

export { CHECK_REJECTS } from "./page.ts";
export { blindJsonSchema } from "./schema.ts";
export type { BlindInputs, BlindJson } from "./types.ts";

export interface BlindFiles {
  readonly json: BlindJson;
  readonly html: string;
  readonly files: readonly { readonly name: "check.html" | "check.json"; readonly text: string }[];
  readonly terminal: (shown: string) => string;
}

/** A blind check's files as text, and its text for a terminal. */
export function renderCheck(inputs: BlindInputs): BlindFiles {
  const json = blindJson(inputs);
  const html = renderBlind(blindPage(inputs));
  return {
    json,
    html,
    files: [
      { name: "check.html", text: html },
      { name: "check.json", text: `${JSON.stringify(json, null, 2)}\n` },
    ],
    terminal: (shown) => blindTerminal(inputs, shown),
  };
}
