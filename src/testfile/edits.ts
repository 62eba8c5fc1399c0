import { InputError } from '../errors.ts';
import { applyClipEdit } from './edit-clips.ts';
import { applyDwellEdit } from './edit-dwells.ts';
import { changed, freshId, replaceById } from './edit-lists.ts';
import type { Edit, EditOf } from './edit-schema.ts';
import { applySetupEdit } from './edit-setups.ts';
import { type Configuration, type TestFile, testSchema } from './schema.ts';

/**
 * Applies an edit to a test file; the given test is left as it was, and what did not change is shared with it.
 * @throws InputError when the edit names something that is not there, or would leave a test file that cannot be read.
 */
export function applyEdit(test: TestFile, edit: Edit): TestFile {
  switch (edit.kind) {
    case 'title':
      return { ...test, title: edit.title };
    case 'replace':
      return edit.test;
    case 'plan':
      return changePlan(test, edit);
    case 'add-configuration':
      return addConfiguration(test, edit);
    case 'change-configuration':
      return {
        ...test,
        configurations: replaceById(test.configurations, edit.id, 'configuration', (each) =>
          changed(each, edit.changes),
        ),
      };
    case 'remove-configuration':
      return removeConfiguration(test, edit);
    case 'add-dwells':
    case 'change-dwells':
    case 'remove-dwells':
    case 'order-dwells':
    case 'dwell-to-ringdown':
    case 'ringdown-to-dwell':
      return applyDwellEdit(test, edit);
    case 'add-clips':
    case 'change-clip':
    case 'relink-clips':
      return applyClipEdit(test, edit);
    case 'add-setup':
    case 'scale':
    case 'motion-axis':
    case 'place-marker':
    case 'remove-marker':
      return applySetupEdit(test, edit);
  }
}

/** An empty test: one camera setup and one configuration, so that clips can be dropped at once. */
export function emptyTest(title: string): TestFile {
  return testSchema.parse({
    format: 'dwellbook-test',
    version: 1,
    title,
    setups: [{ id: 'setup-1', motionAxis: 'auto', markers: [] }],
    configurations: [{ id: 'configuration-1', label: 'as built', excitation: 'force' }],
  });
}

function addConfiguration(test: TestFile, edit: EditOf<'add-configuration'>): TestFile {
  if (test.configurations.some((each) => each.id === edit.id))
    throw new InputError(`There is a configuration "${edit.id}" already; give the new one another id.`);
  const like = test.configurations.find((each) => each.id === edit.like);
  const made: Configuration = {
    ...(like ?? { excitation: 'force' as const }),
    id: edit.id,
    label: edit.label,
    dwells: (like?.dwells ?? []).flatMap(({ id, driveHz }) =>
      driveHz === undefined ? [] : [{ id, driveHz }],
    ),
    sweeps: [],
    ringdowns: [],
  };
  return { ...test, configurations: [...test.configurations, made] };
}

function removeConfiguration(test: TestFile, edit: EditOf<'remove-configuration'>): TestFile {
  const left = test.configurations.filter((each) => each.id !== edit.id);
  if (left.length === test.configurations.length)
    throw new InputError(`There is no configuration "${edit.id}" to remove.`);
  return { ...test, configurations: left };
}

function changePlan(test: TestFile, edit: EditOf<'plan'>): TestFile {
  const plan = changed(test.plan ?? {}, edit.changes);
  const parsed = testSchema.shape.plan.safeParse(plan);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    throw new InputError(
      `The plan cannot take ${String(issue?.path[0] ?? 'this')}: ${issue?.message ?? 'unknown'}.`,
    );
  }
  return { ...test, plan: parsed.data };
}

/** An id that the test does not use yet, made from a name: letters, digits and hyphens, with a number if needed. */
export function freshTestId(test: TestFile, name: string): string {
  const taken = new Set<string>([
    ...test.clips.map((each) => each.id),
    ...test.setups.map((each) => each.id),
    ...test.configurations.flatMap((each) => [
      each.id,
      ...each.dwells.map((dwell) => dwell.id),
      ...each.ringdowns.map((ringdown) => ringdown.id),
    ]),
  ]);
  return freshId(taken, name);
}
