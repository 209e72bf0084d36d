import { Trash2 } from 'lucide-react';
import { Fragment, useId, useRef, useState, type ClipboardEvent, type KeyboardEvent, type ReactNode } from 'react';
import { IconButton } from '../../../components/icon-button';
import { classNames } from '../../../lib/class-names';

export interface SignalColumn<K extends string> {
  key: K;
  label: ReactNode;
  /** Spoken name of a cell: "Shift, row 3". */
  name: string;
  className?: string;
  placeholder?: string;
  inputMode?: 'decimal' | 'numeric' | 'text';
}

export interface CellMark {
  text: string;
  /** It can be saved, but says nothing as it stands. */
  isDoubtful: boolean;
}

interface SignalTableProps<K extends string> {
  caption: string;
  columns: ReadonlyArray<SignalColumn<K>>;
  rows: ReadonlyArray<Record<K, string>>;
  emptyRow: Record<K, string>;
  onRowsChange: (rows: Array<Record<K, string>>) => void;
  issueFor: (row: number, column: K) => string | undefined;
  /** What a cell was understood as, shown beside it. */
  markFor?: (row: number, column: K) => CellMark | undefined;
  /** A last column of something else than text, such as a small button. */
  extra?: { readonly label: ReactNode; readonly className: string; readonly render: (row: number) => ReactNode };
  /** Reads text pasted from a spreadsheet. */
  parsePaste: (text: string) => { cells: ReadonlyArray<Record<K, string>>; notes: readonly string[] };
  isReadOnly: boolean;
}

/**
 * A peak list to type into: Tab goes from cell to cell, Enter and the arrow keys along a column, a block pasted from a
 * spreadsheet fills rows. There is always one empty row at the end.
 */
export function SignalTable<K extends string>({
  caption,
  columns,
  rows,
  emptyRow,
  onRowsChange,
  issueFor,
  markFor,
  extra,
  parsePaste,
  isReadOnly,
}: SignalTableProps<K>) {
  const table = useRef<HTMLTableElement>(null);
  const id = useId();
  const [pasteNotes, setPasteNotes] = useState<readonly string[]>([]);
  const shown = isReadOnly ? rows : [...rows, emptyRow];

  const focusCell = (row: number, column: number) => {
    const cell = table.current?.querySelector<HTMLInputElement>(`[data-cell="${row}:${column}"]`);
    cell?.focus();
    cell?.select();
  };
  const change = (row: number, key: K, value: string) => {
    if (row === rows.length && value === '') return;
    const next = rows.map((cells) => ({ ...cells }));
    if (row === rows.length) next.push({ ...emptyRow });
    next[row]![key] = value;
    onRowsChange(next);
  };
  const remove = (row: number) => {
    onRowsChange(rows.filter((_, index) => index !== row).map((cells) => ({ ...cells })));
    requestAnimationFrame(() => focusCell(Math.max(0, row - 1), 0));
  };
  const onKeyDown = (event: KeyboardEvent<HTMLInputElement>, row: number, column: number) => {
    const step = event.key === 'Enter' || event.key === 'ArrowDown' ? 1 : event.key === 'ArrowUp' ? -1 : 0;
    if (step === 0) return;
    event.preventDefault();
    focusCell(Math.min(shown.length - 1, Math.max(0, row + step)), column);
  };
  const onPaste = (event: ClipboardEvent<HTMLInputElement>, row: number) => {
    const text = event.clipboardData.getData('text/plain');
    if (!/[\t\n\r]/.test(text.trim())) return;
    event.preventDefault();
    const { cells, notes } = parsePaste(text);
    const before = rows.slice(0, row);
    const current = rows[row];
    const isCurrentBlank = current === undefined || columns.every(({ key }) => current[key].trim() === '');
    const after = rows.slice(isCurrentBlank ? row + 1 : row);
    onRowsChange([...before, ...cells, ...after].map((entry) => ({ ...entry })));
    setPasteNotes([`${cells.length} ${cells.length === 1 ? 'row' : 'rows'} pasted`, ...notes]);
    requestAnimationFrame(() => focusCell(before.length + cells.length, 0));
  };

  return (
    <div>
      <table ref={table} className="w-full table-fixed border-collapse text-table">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr className="text-left text-small text-faded">
            <th scope="col" className="w-9 py-1 pr-2 text-right font-normal">
              <span className="sr-only">Row</span>
            </th>
            {columns.map((column) => (
              <th key={column.key} scope="col" className={classNames('px-1 py-1 font-normal', column.className)}>
                {column.label}
              </th>
            ))}
            {extra === undefined ? null : (
              <th scope="col" className={classNames('px-1 py-1 font-normal', extra.className)}>
                {extra.label}
              </th>
            )}
            <th scope="col" className="w-8">
              <span className="sr-only">Remove</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {shown.map((cells, row) => {
            const issues = columns.flatMap((column) => {
              const message = issueFor(row, column.key);
              return message === undefined || row === rows.length ? [] : [{ key: column.key, name: column.name, message }];
            });
            return (
              <Fragment key={row}>
                <tr className="group/row">
                  <td className="pt-1.5 pr-2 text-right align-top text-small text-faded tabular">{row === rows.length ? '' : row + 1}</td>
                  {columns.map((column, at) => {
                    const isWrong = issues.some((issue) => issue.key === column.key);
                    const mark = row === rows.length ? undefined : markFor?.(row, column.key);
                    const markId = `${id}-${row}-${at}`;
                    return (
                      <td key={column.key} className="px-0.5 py-0.5 align-top">
                        <input
                          type="text"
                          data-cell={`${row}:${at}`}
                          aria-label={`${column.name}, row ${row + 1}`}
                          aria-invalid={isWrong || undefined}
                          aria-describedby={isWrong ? `${id}-${row}` : mark === undefined ? undefined : markId}
                          inputMode={column.inputMode ?? 'decimal'}
                          autoComplete="off"
                          spellCheck={false}
                          readOnly={isReadOnly}
                          placeholder={row === rows.length ? column.placeholder : undefined}
                          className="h-7 w-full rounded-small border border-seam bg-cloth px-1.5 tabular hover:border-selvage focus-visible:outline-offset-[-1px] aria-invalid:border-madder"
                          value={cells[column.key]}
                          onChange={(event) => change(row, column.key, event.target.value)}
                          onKeyDown={(event) => onKeyDown(event, row, at)}
                          onPaste={(event) => onPaste(event, row)}
                        />
                        {mark === undefined ? null : (
                          <p id={markId} className={classNames('px-1.5 text-small tabular', mark.isDoubtful ? 'text-weld' : 'text-faded')}>
                            {mark.text}
                          </p>
                        )}
                      </td>
                    );
                  })}
                  {extra === undefined ? null : (
                    <td className="px-0.5 py-0.5 align-top">{row === rows.length ? null : extra.render(row)}</td>
                  )}
                  <td className="pt-0.5 pl-0.5 align-top">
                    {isReadOnly || row === rows.length ? null : (
                      <IconButton
                        label={`Remove row ${row + 1}`}
                        tone="danger"
                        tabIndex={-1}
                        icon={<Trash2 className="size-3.5" />}
                        className="opacity-0 group-focus-within/row:opacity-100 group-hover/row:opacity-100 focus-visible:opacity-100 pointer-coarse:opacity-100"
                        onClick={() => remove(row)}
                      />
                    )}
                  </td>
                </tr>
                {issues.length === 0 ? null : (
                  <tr>
                    <td />
                    <td
                      colSpan={columns.length + (extra === undefined ? 1 : 2)}
                      id={`${id}-${row}`}
                      role="alert"
                      className="px-1 pb-1 text-small text-madder"
                    >
                      {issues.map(({ key, name, message }) => (
                        <p key={key}>
                          {name}: {message}
                        </p>
                      ))}
                    </td>
                  </tr>
                )}
              </Fragment>
            );
          })}
        </tbody>
      </table>
      {pasteNotes.length === 0 ? null : (
        <p role="status" className="mt-2 text-small text-faded">
          {pasteNotes.join('; ')}.
        </p>
      )}
    </div>
  );
}
