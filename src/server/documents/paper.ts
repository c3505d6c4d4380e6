import { join } from 'node:path';
import PDFDocument from 'pdfkit';

/** The faces of our documents: shipped and embedded. The ones that every reader has know neither a true minus nor most names of the world. */
export type Face = 'plain' | 'bold';

const files: Readonly<Record<Face, string>> = { plain: 'atkinson-hyperlegible-next-400.ttf', bold: 'atkinson-hyperlegible-next-700.ttf' };

/** A Letter sheet to write on, its margin 3/4 in, and its bytes once `paper.end()` was called. */
export interface Paper {
  readonly paper: PDFKit.PDFDocument;
  readonly done: Promise<Uint8Array<ArrayBuffer>>;
}

/** Opens a document on Letter paper with our faces `plain` and `bold`; pages stay open until its end, for their numbers. */
export function openPaper(title: string): Paper {
  const paper = new PDFDocument({ size: 'LETTER', margin: 54, bufferPages: true, font: join(process.cwd(), 'fonts', files.plain), lang: 'en-US', displayTitle: true, info: { Title: title, Creator: 'Skidway' } });
  for (const [face, file] of Object.entries(files)) paper.registerFont(face, join(process.cwd(), 'fonts', file));
  const parts: Buffer[] = [];
  const done = new Promise<Uint8Array<ArrayBuffer>>((resolve, reject) => {
    paper.on('data', (part: Buffer) => parts.push(part));
    paper.on('end', () => resolve(new Uint8Array(Buffer.concat(parts))));
    paper.on('error', reject);
  });
  return { paper, done };
}
