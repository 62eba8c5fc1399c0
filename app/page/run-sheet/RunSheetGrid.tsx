import type { ReadonlySignal } from '@preact/signals';
import { useRef, useState } from 'preact/hooks';
import { amplitudeUnit } from '../format/amplitude.ts';
import { edit, notify } from '../state/bench.ts';
import { configuration, selectDwell, selectedId } from '../state/view.ts';
import { dwellsFromText, rowsAsText } from './clipboard.ts';
import { type CellPlace, movedPlace } from './grid-keys.ts';
import { Row } from './Row.tsx';
import { commitCell, type EditableColumn, removeDwells } from './row-actions.ts';
import type { RowView } from './row-view.ts';

const COLUMNS: readonly (EditableColumn | 'says')[] = ['drive', 'amplitude', 'lag', 'says'];

/** The rows as a grid that is gone through and changed by keyboard as well as by pointer. */
export function RunSheetGrid({ rows }: { rows: ReadonlySignal<readonly RowView[]> }) {
  const table = useRef<HTMLTableElement>(null);
  const [column, setColumn] = useState(0);
  const [editing, setEditing] = useState<{ id: string; column: EditableColumn; start: string | null } | null>(
    null,
  );
  const shown = rows.value;
  const at: CellPlace = {
    row: Math.max(
      0,
      shown.findIndex((row) => row.id === selectedId.value),
    ),
    column,
  };

  const focusCell = ({ row, column: to }: CellPlace): void => {
    const id = shown[row]?.id;
    if (id === undefined) return;
    selectDwell(id);
    setColumn(to);
    requestAnimationFrame(() =>
      table.current?.querySelector<HTMLElement>(`tr:nth-child(${row + 1}) [data-column="${to}"]`)?.focus(),
    );
  };
  const begin = (start: string | null): void => {
    const [row, name] = [shown[at.row], COLUMNS[at.column]];
    if (row?.kind === 'dwell' && name !== undefined && name !== 'says')
      setEditing({ id: row.id, column: name, start });
  };
  const finish = async (text: string | null, move: number): Promise<void> => {
    const [place, sheet] = [editing, configuration.value];
    setEditing(null);
    const row = sheet?.dwells.find((each) => each.id === place?.id);
    if (text !== null && row && place) await commitCell(row, place.column, text);
    focusCell({ row: at.row + move, column: at.column });
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    if (editing || event.altKey) return;
    const modified = event.ctrlKey || event.metaKey;
    const to = movedPlace(at, event.key, shown.length, COLUMNS.length, modified);
    if (to) focusCell(to);
    else if (modified) return;
    else if (event.key === 'Enter' || event.key === 'F2') begin(null);
    else if (event.key === 'Delete' || event.key === 'Backspace')
      clearCell(shown[at.row], COLUMNS[at.column]);
    else if (event.key.length === 1 && /[\d.,+\-±]/.test(event.key)) begin(event.key);
    else return;
    event.preventDefault();
  };
  const heading = `amplitude mm, ${amplitudeUnit.value.short}`;
  return (
    <div
      class="rows"
      onCopy={(event) => {
        if (editing) return;
        event.preventDefault();
        event.clipboardData?.setData('text/plain', rowsAsText(shown, heading));
        notify('info', `${shown.length} rows were copied.`);
      }}
      onPaste={(event) => {
        if (editing) return;
        event.preventDefault();
        void paste(event.clipboardData?.getData('text/plain') ?? '');
      }}
    >
      <table
        ref={table}
        // biome-ignore lint/a11y/noNoninteractiveElementToInteractiveRole: a table that is worked in is a grid
        role="grid"
        aria-label="Dwells"
        aria-rowcount={shown.length + 1}
        onKeyDown={onKeyDown}
      >
        <thead>
          <tr>
            <th scope="col">drive Hz</th>
            <th scope="col">{heading}</th>
            <th scope="col">lag °</th>
            <th scope="col">verdict</th>
          </tr>
        </thead>
        <tbody>
          {shown.map((row, index) => (
            <Row
              key={`${row.kind} ${row.id}`}
              row={row}
              selected={index === at.row}
              column={index === at.row ? column : -1}
              editing={editing?.id === row.id ? editing : null}
              onChoose={(to) => {
                selectDwell(row.id);
                setColumn(to);
              }}
              onEdit={() => begin(null)}
              onDone={finish}
            />
          ))}
        </tbody>
      </table>
      {shown.length === 0 && (
        <p class="soft empty">No dwells yet: drop clips here, or add a dwell and type its numbers.</p>
      )}
    </div>
  );
}

function clearCell(row: RowView | undefined, column: EditableColumn | 'says' | undefined): void {
  const spec = configuration.value?.dwells.find((each) => each.id === row?.id);
  if (!spec || column === undefined) return;
  if (column === 'drive') void removeDwells([spec.id]);
  else if (column !== 'says' && spec.typed) void commitCell(spec, column, '');
}

async function paste(text: string): Promise<void> {
  const sheet = configuration.value;
  if (!sheet) return;
  const { dwells, passedOver } = dwellsFromText(text, sheet, amplitudeUnit.value.factor);
  if (dwells.length > 0) await edit({ kind: 'add-dwells', configuration: sheet.id, dwells });
  if (passedOver > 0 || dwells.length === 0)
    notify(
      'caution',
      `${passedOver || 'No'} lines without a drive frequency in the first column were passed over.`,
    );
}
