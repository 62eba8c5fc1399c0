import { session } from 'electron';

/** Refuses every permission and device a page could ask for, and every download but the page's own saves. */
export function setupPermissions(): void {
  const { defaultSession } = session;
  defaultSession.setPermissionRequestHandler((_contents, _permission, answer) => answer(false));
  defaultSession.setPermissionCheckHandler(() => false);
  defaultSession.setDevicePermissionHandler(() => false);
  defaultSession.on('will-download', (event, item) => {
    // plots and tables that the user saves are made in the page
    if (!item.getURL().startsWith('blob:dwellbook://bench/')) event.preventDefault();
  });
}
