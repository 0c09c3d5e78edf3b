import { type CellProblem, isEmptyCell, numberCell } from './cells.ts';
import type { ColumnName } from './columnNames.ts';
import type { MappedColumn } from './columns.ts';
import type { DecimalMark } from './decimal.ts';

/** The cells of one row by canonical column, and the problems found so far. */
export class RowCells {
  readonly problems: CellProblem[] = [];
  private readonly cells: readonly string[];
  private readonly columns: ReadonlyMap<ColumnName, MappedColumn>;
  private readonly mark: DecimalMark;

  constructor(cells: readonly string[], columns: ReadonlyMap<ColumnName, MappedColumn>, mark: DecimalMark) {
    this.cells = cells;
    this.columns = columns;
    this.mark = mark;
  }

  /** The cell as the file has it, without spaces around it; '' where the log has no such column. */
  original(name: ColumnName): string {
    const column = this.columns.get(name);
    return column ? (this.cells[column.index] ?? '').trim() : '';
  }

  /** Unit of the column's cells that carry none of their own. */
  unit(name: ColumnName): string | null {
    return this.columns.get(name)?.unit ?? null;
  }

  text(name: ColumnName): string | null {
    const text = this.original(name);
    return isEmptyCell(text) ? null : text;
  }

  /** A number in the unit used inside; null for an empty cell and for one that is refused. */
  number(name: ColumnName): number | null {
    const text = this.original(name);
    const column = this.columns.get(name);
    if (!column || isEmptyCell(text)) return null;
    const read = numberCell(text, column, this.mark);
    if ('ok' in read) return read.value;
    this.problems.push(read);
    return null;
  }

  refuse(column: ColumnName, code: CellProblem['code'], message: string): void {
    this.problems.push({ column, value: this.original(column), code, message });
  }
}
