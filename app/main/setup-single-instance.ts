import { app } from 'electron';

/**
 * Sees to it that the program runs once: a second start hands its files to the first and ends.
 * @returns false where this is the second
 */
export function setupSingleInstance(onFiles: (paths: string[]) => void, onShown: () => void): boolean {
  if (!app.requestSingleInstanceLock()) {
    app.quit();
    return false;
  }
  app.on('second-instance', (_event, argv) => {
    onShown();
    const files = filesOf(argv);
    if (files.length > 0) onFiles(files);
  });
  return true;
}

/** Opens files that the system hands over (double click in a file manager, drop on the dock). */
export function setupOpenFile(onFiles: (paths: string[]) => void): void {
  app.on('open-file', (event, path) => {
    event.preventDefault();
    onFiles([path]);
  });
}

/** The files of a command line: what follows the program and its script and is no option. */
export function filesOf(argv: readonly string[], isPackaged: boolean = app.isPackaged): string[] {
  return argv.slice(isPackaged ? 1 : 2).filter((each) => !each.startsWith('-'));
}
