import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";

export type SchemaOf = "plan" | "report" | "check";

export function schema(of: SchemaOf, terminal: Terminal, library: Library): ExitStatus {
  terminal.print(JSON.stringify(schemaOf(of, library), null, 2));
  return 0;
}

function schemaOf(of: SchemaOf, library: Library): object {
  switch (of) {
    case "plan":
      return library.planJsonSchema();
    case "report":
      return library.reportJsonSchema();
    case "check":
      return library.blindJsonSchema();
  }
}
