import { readdir, stat } from "node:fs/promises";
import path from "node:path";

const FIGURES = "figures";
const ALONE = ["page-one.html", "decision.csv"];
/** What `--figures` names, and nothing else that may lie in a folder called figures. */
const OURS =
  /^(forest|flow|before-after|(allocation|shape|sampling|choices|accrual|days|subgroup|afterwards)-\d+)\.svg$/;

/** The files of an earlier `--figures` that lie in a report's folder. */
export async function lyingExtras(folder: string): Promise<string[]> {
  const figures = await readdir(path.join(folder, FIGURES)).catch(() => []);
  const names = [...ALONE, ...figures.filter((name) => OURS.test(name)).map((name) => `${FIGURES}/${name}`)];
  const found = await Promise.all(names.map((name) => isFile(path.join(folder, name))));
  return names.filter((_, i) => found[i]);
}

function isFile(name: string): Promise<boolean> {
  return stat(name).then(
    (found) => found.isFile(),
    () => false,
  );
}
