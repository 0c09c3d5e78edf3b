import { CsvError, parse } from 'csv-parse/sync';

/**
 * Cells of whole records (see `assembleRecords`), by csv-parse. One answer a record, in order; null for one it cannot read.
 * Spaces before a cell are dropped so that `a, "b, c"` keeps its quotes.
 */
export function cellsOfRecords(records: readonly string[], delimiter: string): (readonly string[] | null)[] {
  if (records.length === 0) return [];
  const together = parseRecords(records.join('\n'), delimiter);
  if (together?.length === records.length) return together;
  // One record that csv-parse sees otherwise than the splitter must not shift the others: read them one by one.
  return records.map((record) => {
    const alone = parseRecords(record, delimiter);
    return alone?.length === 1 ? (alone[0] ?? null) : null;
  });
}

function parseRecords(text: string, delimiter: string): string[][] | null {
  if (text === '') return [['']];
  try {
    return parse(text, {
      delimiter,
      ltrim: true,
      record_delimiter: '\n',
      relax_column_count: true,
      relax_quotes: true,
      skip_empty_lines: false,
    });
  } catch (error) {
    if (error instanceof CsvError) return null;
    throw error;
  }
}
