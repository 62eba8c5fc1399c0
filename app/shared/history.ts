import { editLabel } from '../../src/testfile/edit-labels.ts';
import type { Edit } from '../../src/testfile/edit-schema.ts';
import { applyEdit } from '../../src/testfile/edits.ts';
import type { TestFile } from '../../src/testfile/schema.ts';

const MOST_STEPS = 2000; // states share what did not change, so a step costs little

interface Step {
  readonly label: string;
  readonly test: TestFile;
}

/** A test with its undo and redo steps. What it gives back for the journal is an edit that leads to the same state. */
export class History {
  #test: TestFile;
  readonly #past: Step[] = [];
  readonly #future: Step[] = [];

  constructor(test: TestFile) {
    this.#test = test;
  }

  get test(): TestFile {
    return this.#test;
  }

  get undoLabel(): string | null {
    return this.#past.at(-1)?.label ?? null;
  }

  get redoLabel(): string | null {
    return this.#future.at(-1)?.label ?? null;
  }

  /** Applies an edit as a new step. Throws InputError, and changes nothing, where the edit cannot be applied. */
  apply(edit: Edit): Edit {
    const next = applyEdit(this.#test, edit);
    this.#past.push({ label: editLabel(edit), test: this.#test });
    if (this.#past.length > MOST_STEPS) this.#past.shift();
    this.#future.length = 0;
    this.#test = next;
    return edit;
  }

  /** Goes a step back; null where there is none. */
  undo(): Edit | null {
    return this.#step(this.#past, this.#future, 'undo');
  }

  /** Goes a step forward again; null where there is none. */
  redo(): Edit | null {
    return this.#step(this.#future, this.#past, 'redo');
  }

  #step(from: Step[], to: Step[], verb: string): Edit | null {
    const step = from.pop();
    if (!step) return null;
    to.push({ label: step.label, test: this.#test });
    this.#test = step.test;
    return { kind: 'replace', label: `${verb} ${step.label}`, test: step.test };
  }
}
