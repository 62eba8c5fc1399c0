/** A command of menu and keyboard: declared once, for the page's menu, the system's menu and the list of shortcuts. */
export interface Command {
  readonly id: string;
  readonly label: string;
  readonly menu: 'File' | 'Edit' | 'Measure' | 'View' | 'Help';
  /** In Electron's notation, `CmdOrCtrl+S`; absent where the command has none. */
  readonly keys?: string;
}

export const COMMANDS = [
  { id: 'new-test', label: 'New test', menu: 'File', keys: 'CmdOrCtrl+N' },
  { id: 'open-test', label: 'Open test …', menu: 'File', keys: 'CmdOrCtrl+O' },
  { id: 'add-clips', label: 'Add clips …', menu: 'File', keys: 'CmdOrCtrl+I' },
  { id: 'add-folder', label: 'Add a folder of clips …', menu: 'File', keys: 'CmdOrCtrl+Shift+I' },
  { id: 'open-demo', label: 'Open the demo test', menu: 'File' },
  { id: 'save-as', label: 'Save as …', menu: 'File', keys: 'CmdOrCtrl+Shift+S' },
  { id: 'close-test', label: 'Close the test', menu: 'File' },
  { id: 'undo', label: 'Undo', menu: 'Edit', keys: 'CmdOrCtrl+Z' },
  { id: 'redo', label: 'Redo', menu: 'Edit', keys: 'CmdOrCtrl+Shift+Z' },
  { id: 'add-dwell', label: 'Add a dwell', menu: 'Edit', keys: 'CmdOrCtrl+Enter' },
  { id: 'duplicate-dwell', label: 'Duplicate the dwell', menu: 'Edit', keys: 'CmdOrCtrl+D' },
  { id: 'exclude-dwell', label: 'Exclude or include the dwell', menu: 'Edit', keys: 'CmdOrCtrl+E' },
  { id: 'sort-dwells', label: 'Sort by drive frequency', menu: 'Edit' },
  { id: 'add-configuration', label: 'Add a configuration', menu: 'Edit' },
  { id: 'measure-rest', label: 'Measure what is not measured', menu: 'Measure', keys: 'F5' },
  { id: 'measure-clip', label: 'Measure this clip again', menu: 'Measure', keys: 'Shift+F5' },
  { id: 'cancel', label: 'Cancel measuring', menu: 'Measure' },
  { id: 'find-clips', label: 'Find moved clips …', menu: 'Measure' },
  { id: 'page-plan', label: 'Plan', menu: 'View', keys: 'CmdOrCtrl+1' },
  { id: 'page-measure', label: 'Measure', menu: 'View', keys: 'CmdOrCtrl+2' },
  { id: 'page-resonance', label: 'Resonance', menu: 'View', keys: 'CmdOrCtrl+3' },
  { id: 'page-compare', label: 'Compare', menu: 'View', keys: 'CmdOrCtrl+4' },
  { id: 'page-report', label: 'Report', menu: 'View', keys: 'CmdOrCtrl+5' },
  { id: 'preferences', label: 'Preferences …', menu: 'View', keys: 'CmdOrCtrl+,' },
  { id: 'shortcuts', label: 'Shortcuts', menu: 'Help', keys: 'F1' },
] as const satisfies readonly Command[];

export type CommandId = (typeof COMMANDS)[number]['id'];
