import { memo } from 'preact/compat';
import { useLayoutEffect, useRef } from 'preact/hooks';
import type { EditableColumn } from './row-actions.ts';
import type { RowView } from './row-view.ts';

/** What a row is told. */
interface RowProps {
  readonly row: RowView;
  readonly selected: boolean;
  /** Column of the focus in this row, from 0; -1 where it is not here. */
  readonly column: number;
  readonly editing: { readonly column: EditableColumn; readonly start: string | null } | null;
  readonly onChoose: (column: number) => void;
  readonly onEdit: () => void;
  readonly onDone: (text: string | null, move: number) => Promise<void>;
}

/** One row of the run sheet. */
export const Row = memo(
  (props: RowProps) => {
    const { row, selected, editing } = props;
    const cell = (index: number) => ({
      role: 'gridcell' as const,
      'data-column': index,
      tabIndex: props.column === index ? 0 : -1,
      onClick: () => props.onChoose(index),
      onDblClick: () => {
        props.onChoose(index);
        props.onEdit();
      },
    });
    const input = (column: EditableColumn, now: string) =>
      editing?.column === column ? <CellInput start={editing.start ?? now} onDone={props.onDone} /> : null;
    return (
      <tr aria-selected={selected} class={row.excluded === null ? '' : 'excluded'}>
        <td {...cell(0)}>{input('drive', row.drive) ?? row.drive}</td>
        <td {...cell(1)}>
          {input('amplitude', row.amplitudeU ? `${row.amplitude} ± ${row.amplitudeU}` : row.amplitude) ?? (
            <>
              {row.amplitude}
              {row.amplitudeU && <small> ±{row.amplitudeU}</small>}
            </>
          )}
        </td>
        <td {...cell(2)}>{input('lag', row.lag) ?? row.lag}</td>
        <td {...cell(3)} class={row.tone} title={row.excluded ? `excluded: ${row.excluded}` : undefined}>
          {row.excluded === null ? row.says : `excluded: ${row.excluded}`}
        </td>
      </tr>
    );
  },
  (a, b) =>
    a.selected === b.selected &&
    a.column === b.column &&
    a.editing === b.editing &&
    !b.selected &&
    sameRow(a.row, b.row),
);

function sameRow(a: RowView, b: RowView): boolean {
  return (Object.keys(a) as (keyof RowView)[]).every((key) => a[key] === b[key]);
}

function CellInput({ start, onDone }: { start: string; onDone: RowProps['onDone'] }) {
  const input = useRef<HTMLInputElement>(null);
  const done = useRef(false);
  // before the next key arrives, so that what is typed on goes in behind the first key
  useLayoutEffect(() => {
    input.current?.focus();
    if (start.length > 1) input.current?.select();
    else input.current?.setSelectionRange(start.length, start.length);
  }, []);
  const finish = (text: string | null, move: number): void => {
    if (done.current) return;
    done.current = true;
    void onDone(text, move);
  };
  return (
    <input
      ref={input}
      defaultValue={start}
      aria-label="New value"
      inputMode="decimal"
      onBlur={(event) => finish(event.currentTarget.value, 0)}
      onKeyDown={(event) => {
        event.stopPropagation();
        if (event.key === 'Enter') finish(event.currentTarget.value, event.shiftKey ? -1 : 1);
        else if (event.key === 'Tab') finish(event.currentTarget.value, 0);
        else if (event.key === 'Escape') finish(null, 0);
        else return;
        event.preventDefault();
      }}
    />
  );
}
