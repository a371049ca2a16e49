// Lets Node 20 run the benches as they are: node --import ./test/bench/typescript.mjs test/bench/<bench>.ts
import { register } from "node:module";

register("./typescript-hooks.mjs", import.meta.url);
