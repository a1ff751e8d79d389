import { degrees, PDFDocument, rgb, StandardFonts, type PDFFont, type PDFPage } from 'pdf-lib';
import type { RandomSource } from '../server/keys/random-source';

const ink = rgb(0.16, 0.2, 0.33);
const rule = rgb(0.86, 0.84, 0.78);
const paper = rgb(0.965, 0.953, 0.925);
const width = 420;
const lineHeight = 46;
const margin = 34;

/**
 * A page as a student might write it: ruled paper, slanting lines, letters that do not quite stand in line.
 *
 * @param lines text with Greek letters and √; the last one is underlined
 * @returns a PDF without any date or name in it
 */
export async function drawWorkedPage(lines: readonly string[], source: RandomSource): Promise<Uint8Array> {
  const document = await PDFDocument.create({ updateMetadata: false });
  const fonts = {
    latin: await document.embedFont(StandardFonts.TimesRomanItalic),
    greek: await document.embedFont(StandardFonts.Symbol),
  };
  const height = Math.max(250, 2 * margin + lines.length * lineHeight);
  const page = document.addPage([width, height]);
  page.drawRectangle({ x: 0, y: 0, width, height, color: paper });
  for (let at = 14; at < Math.max(width, height); at += 18) {
    page.drawLine({ start: { x: at, y: 0 }, end: { x: at, y: height }, thickness: 0.4, color: rule });
    page.drawLine({ start: { x: 0, y: at }, end: { x: width, y: at }, thickness: 0.4, color: rule });
  }
  for (const [index, line] of lines.entries()) {
    const start = { x: margin + jitter(source, 8), y: height - margin - 18 - index * lineHeight + jitter(source, 3) };
    const slope = jitter(source, 0.02);
    const end = writeLine(page, fonts, line, start, slope, source);
    if (index < lines.length - 1) continue;
    const under = { start: { x: end - 60, y: start.y - 8 }, end: { x: end + 4, y: start.y - 6 + jitter(source, 3) } };
    page.drawLine({ ...under, thickness: 1.4, color: ink });
  }
  return document.save();
}

function writeLine(
  page: PDFPage,
  fonts: { latin: PDFFont; greek: PDFFont },
  line: string,
  start: { x: number; y: number },
  slope: number,
  source: RandomSource,
): number {
  let x = start.x;
  for (const sign of line) {
    const font = /[\u0370-\u03ff\u221a\u2212\u00d7\u2265\u2248\u2192\u2329\u232a]/.test(sign)
      ? fonts.greek
      : fonts.latin;
    const size = 19 + jitter(source, 1.2);
    const y = start.y + (x - start.x) * slope + jitter(source, 1);
    page.drawText(sign, { x, y, size, font, color: ink, rotate: degrees(jitter(source, 5)) });
    x += font.widthOfTextAtSize(sign, size) + jitter(source, 0.5);
  }
  return x;
}

/** A number between −half and +half of the range. */
function jitter(source: RandomSource, range: number): number {
  return (source.below(1001) / 1000 - 0.5) * range;
}
