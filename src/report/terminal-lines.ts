/** Plain lines for a terminal. */

const WIDTH = 100;

/** A text behind its label, which is set to nine columns. */
export function labelled(label: string, text: string): string[] {
  return wrapped(text, WIDTH - 9).map((line, i) => (i === 0 ? label.padEnd(9) : " ".repeat(9)) + line);
}

/** Lines of at most so many characters. */
export function wrapped(text: string, width = WIDTH): string[] {
  const lines: string[] = [];
  for (const word of printable(text).split(" ")) {
    const last = lines[lines.length - 1];
    if (last === undefined || last.length + word.length + 1 > width) lines.push(word);
    else lines[lines.length - 1] = `${last} ${word}`;
  }
  return lines;
}

/** A name from the plan must not move the cursor or colour the screen: control characters become spaces. */
export function printable(text: string): string {
  return text.replace(/[\p{Cc}\p{Cf}\u2028\u2029]+/gu, " ").replace(/ +/g, " ");
}
