/** Name and version of the program, as written into results and reports. */
export const PROGRAM = 'Dwellbook 0.1.0';
