import { parseString } from 'fast-csv';

/** Fields of a CSV text, read by another route than the one that wrote it. */
export function parsedCsv(text: string): Promise<string[][]> {
  return new Promise((resolve, reject) => {
    const rows: string[][] = [];
    parseString<string[], string[]>(text)
      .on('data', (row) => rows.push(row))
      .on('error', reject)
      .on('end', () => resolve(rows));
  });
}
