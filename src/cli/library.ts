/** What the command line needs of the library entry. It is loaded on demand, so that help and usage errors come at once. */
export interface Progress {
  readonly stage: string;
  readonly rows: number;
  /** Null where it cannot be known. */
  readonly share: number | null;
}

export interface CloseoutOptions {
  readonly out?: string;
  readonly threads?: number;
  readonly memory?: string;
  readonly progress?: (progress: Progress) => void;
  readonly signal?: AbortSignal;
}

export type Outcome =
  | { readonly status: 0; readonly terminal: string; readonly folder: string }
  | { readonly status: 2 | 3; readonly text: string };

export interface Library {
  closeout(planPath: string, options: CloseoutOptions): Promise<Outcome>;
  planJsonSchema(): object;
  reportJsonSchema(): object;
}

export async function loadLibrary(): Promise<Library> {
  const { closeout, planJsonSchema, reportJsonSchema } = await import("../index.ts");
  return { closeout, planJsonSchema, reportJsonSchema };
}
