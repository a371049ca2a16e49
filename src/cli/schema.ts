import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

export type SchemaOf = "plan" | "report";

export function schema(of: SchemaOf, terminal: Terminal, library: Library): ExitStatus {
  const json = of === "plan" ? library.planJsonSchema() : library.reportJsonSchema();
  terminal.print(JSON.stringify(json, null, 2));
  return 0;
}
