import { COMMANDS } from '../../shared/commands.ts';
import { Dialog, showDialog } from './dialogs.tsx';
import { keysText } from './shortcut-keys.ts';

const ON_THE_PICTURE: readonly [string, string][] = [
  ['Arrow keys', 'move the selected point by 0.1 px'],
  ['Shift + arrow keys', 'move it by 1 px'],
  [', and .', 'one frame back, one frame on'],
  ['+ and -', 'zoom in, zoom out'],
  ['0', 'fit the picture to the page'],
  ['Escape', 'stop placing a point'],
];

const IN_THE_RUN_SHEET: readonly [string, string][] = [
  ['Arrow keys, Home, End', 'go from cell to cell'],
  ['Enter, F2 or typing', 'change the cell; Escape leaves it as it was'],
  ['Delete', 'clear the cell; in the first column, remove the row'],
  ['Ctrl+C, Ctrl+V', 'copy the rows to a spreadsheet, paste them from one'],
];

/** The list of shortcuts. */
export function showShortcuts(): void {
  showDialog(() => (
    <Dialog title="Shortcuts">
      <table>
        <tbody>
          {COMMANDS.map((command) =>
            'keys' in command ? (
              <Line key={command.id} keys={keysText(command.keys)} does={command.label} />
            ) : null,
          )}
          <Heading text="On the picture" />
          {ON_THE_PICTURE.map(([keys, does]) => (
            <Line key={keys} keys={keys} does={does} />
          ))}
          <Heading text="In the run sheet" />
          {IN_THE_RUN_SHEET.map(([keys, does]) => (
            <Line key={keys} keys={keys} does={does} />
          ))}
        </tbody>
      </table>
      <form method="dialog" class="row end">
        <button type="submit">Close</button>
      </form>
    </Dialog>
  ));
}

function Heading({ text }: { text: string }) {
  return (
    <tr>
      <th colSpan={2} scope="colgroup">
        {text}
      </th>
    </tr>
  );
}

function Line({ keys, does }: { keys: string; does: string }) {
  return (
    <tr>
      <td>
        <kbd>{keys}</kbd>
      </td>
      <td>{does}</td>
    </tr>
  );
}
