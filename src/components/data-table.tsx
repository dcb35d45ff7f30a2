import type { KeyboardEvent, ReactNode } from 'react';

export interface Column<R> {
  key: string;
  head: ReactNode;
  cell: (row: R) => ReactNode;
  /** Right-aligned with its head. */
  numeric?: boolean;
  className?: string;
  /** Field name for sorting; the head becomes a button. */
  sort?: string;
}

interface Props<R> {
  caption: string;
  columns: readonly Column<R>[];
  rows: readonly R[];
  rowKey: (row: R) => string;
  /** Enter or click opens; arrows move. */
  onOpen?: (row: R) => void;
  chosen?: string;
  sorted?: { by: string; descending: boolean };
  onSort?: (by: string) => void;
  foot?: ReactNode;
  /** A second line of a row, under its name. */
  detail?: (row: R) => ReactNode;
}

/** Three rules, no stripes; name first. On narrow screens it scrolls sideways within itself. */
export function DataTable<R>({
  caption,
  columns,
  rows,
  rowKey,
  onOpen,
  chosen,
  sorted,
  onSort,
  foot,
  detail,
}: Props<R>) {
  return (
    <div className="overflow-x-auto" tabIndex={-1}>
      <table className="ruled text-dense">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr>
            {columns.map((column) => (
              <th
                key={column.key}
                scope="col"
                className={`${column.numeric ? 'num' : ''} ${column.className ?? ''}`}
                aria-sort={sortState(column, sorted)}
              >
                {column.sort && onSort ? (
                  <button
                    type="button"
                    className="font-semibold hover:underline"
                    onClick={() => onSort(column.sort as string)}
                  >
                    {column.head}
                    {sorted?.by === column.sort && (sorted.descending ? ' ↓' : ' ↑')}
                  </button>
                ) : (
                  column.head
                )}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr
              key={rowKey(row)}
              data-chosen={chosen === rowKey(row)}
              data-link={Boolean(onOpen)}
              tabIndex={onOpen ? 0 : undefined}
              onClick={onOpen && (() => onOpen(row))}
              onKeyDown={onOpen && ((event) => rowKeys(event, () => onOpen(row)))}
              className={onOpen ? 'cursor-pointer' : ''}
            >
              {columns.map((column, index) => (
                <td key={column.key} className={`${column.numeric ? 'num' : ''} ${column.className ?? ''}`}>
                  {column.cell(row)}
                  {index === 0 && detail?.(row)}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
        {foot && (
          <tfoot>
            <tr>
              <td colSpan={columns.length} className="border-t border-ink font-semibold">
                {foot}
              </td>
            </tr>
          </tfoot>
        )}
      </table>
    </div>
  );
}

function sortState<R>(column: Column<R>, sorted: Props<R>['sorted']): 'ascending' | 'descending' | undefined {
  if (!column.sort || sorted?.by !== column.sort) return undefined;
  return sorted.descending ? 'descending' : 'ascending';
}

function rowKeys(event: KeyboardEvent<HTMLTableRowElement>, open: () => void): void {
  if (event.target !== event.currentTarget) return;
  const neighbour =
    event.key === 'ArrowDown'
      ? event.currentTarget.nextElementSibling
      : event.key === 'ArrowUp'
        ? event.currentTarget.previousElementSibling
        : null;
  if (neighbour instanceof HTMLElement) {
    event.preventDefault();
    neighbour.focus();
  }
  if (event.key === 'Enter') open();
}
