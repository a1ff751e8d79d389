import { createInterface } from 'node:readline';
import { checkLine, type CheckedLine } from './check-line';

/** Whatever goes wrong in one line, the rest go on. */
function answer(text: string): CheckedLine {
  try {
    return checkLine(text);
  } catch (error) {
    // Nothing is known that comes here: a fault of the tool itself must not take the other lines with it.
    return { error: `This line cannot be judged: ${error instanceof Error ? error.message : String(error)}` };
  }
}

// An empty line is answered too, so that answers stand beside their lines; at the end of the input it is no line.
let blank = 0;
for await (const text of createInterface({ input: process.stdin, crlfDelay: Infinity })) {
  if (text.trim() === '') {
    blank += 1;
    continue;
  }
  for (; blank > 0; blank -= 1) process.stdout.write(`${JSON.stringify({ error: 'This line is empty.' })}\n`);
  process.stdout.write(`${JSON.stringify(answer(text))}\n`);
}
