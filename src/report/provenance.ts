import type { Reduction } from "../engine/types.ts";
import type { ProvenanceJson } from "./json-types.ts";

/** What a report was made from: no path of the machine, and no time but the log's. */
export function provenanceJson(of: {
  readonly version: string;
  readonly planSha256: string;
  readonly planText: string;
  readonly reduction: Pick<Reduction, "inputs" | "lists" | "engine">;
}): ProvenanceJson {
  const { inputs, lists, engine } = of.reduction;
  return {
    version: of.version,
    plan: { sha256: of.planSha256, text: of.planText },
    inputs: inputs.map(({ name, bytes, sha256, rows }) => ({ name, bytes, sha256, rows })),
    lists: lists.map(({ name, bytes, sha256, rows }) => ({ name, bytes, sha256, rows })),
    engine: { name: engine.name, version: engine.version },
  };
}
