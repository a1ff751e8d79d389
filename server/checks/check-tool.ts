import { createInterface } from 'node:readline';
import { checkLine } from './check-line';

for await (const text of createInterface({ input: process.stdin, crlfDelay: Infinity }))
  if (text.trim() !== '') process.stdout.write(`${JSON.stringify(checkLine(text))}\n`);
