import { readFile } from "node:fs/promises";
import { fileURLToPath } from "node:url";
import typescript from "typescript";

/** A .ts file as JavaScript, its types taken out and not checked. */
export async function load(url, context, next) {
  if (!url.endsWith(".ts")) return next(url, context);
  const source = await readFile(fileURLToPath(url), "utf8");
  const { outputText } = typescript.transpileModule(source, {
    compilerOptions: { module: "ESNext", target: "ES2022", verbatimModuleSyntax: true, inlineSourceMap: true },
    fileName: fileURLToPath(url),
  });
  return { format: "module", shortCircuit: true, source: outputText };
}
