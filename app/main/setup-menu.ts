import { app, Menu, type MenuItemConstructorOptions } from 'electron';
import { COMMANDS, type Command } from '../shared/commands.ts';

/** The system's menu, made from the table of commands. */
export function setupMenu(run: (command: string) => void): void {
  Menu.setApplicationMenu(Menu.buildFromTemplate(menuTemplate(run, process.platform, app.isPackaged)));
}

/** The menu as data. */
export function menuTemplate(
  run: (command: string) => void,
  platform: NodeJS.Platform,
  isPackaged: boolean,
): MenuItemConstructorOptions[] {
  const commands = (menu: Command['menu']): MenuItemConstructorOptions[] =>
    COMMANDS.filter((each) => each.menu === menu).map((each) => ({
      label: each.label,
      click: () => run(each.id),
      ...('keys' in each ? { accelerator: each.keys } : {}),
    }));
  const rule: MenuItemConstructorOptions = { type: 'separator' };
  const text: MenuItemConstructorOptions[] = [
    { role: 'cut' },
    { role: 'copy' },
    { role: 'paste' },
    { role: 'selectAll' },
  ];
  const developer: MenuItemConstructorOptions[] = isPackaged ? [] : [rule, { role: 'toggleDevTools' }];
  return [
    ...(platform === 'darwin' ? [{ role: 'appMenu' } as const] : []),
    {
      label: 'File',
      submenu: [...commands('File'), rule, { role: platform === 'darwin' ? 'close' : 'quit' }],
    },
    { label: 'Edit', submenu: [...commands('Edit'), rule, ...text] },
    { label: 'Measure', submenu: commands('Measure') },
    { label: 'View', submenu: [...commands('View'), rule, { role: 'togglefullscreen' }, ...developer] },
    { label: 'Help', submenu: commands('Help') },
  ];
}
