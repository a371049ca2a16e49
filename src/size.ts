import { type SizeAnswer, type SizeQuestion, sizeAhead } from "./decision/index.ts";
import { sizeText } from "./report/size.ts";

/** The size of a test to come, with its text for a terminal; or what is wrong with the question. */
export function size(
  question: SizeQuestion,
): (SizeAnswer & { readonly text: string }) | { readonly problems: readonly string[] } {
  const answer = sizeAhead(question);
  return "problems" in answer ? answer : { ...answer, text: sizeText(question, answer) };
}
