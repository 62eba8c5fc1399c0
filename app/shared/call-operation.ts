import { CancelledError, InputError } from '../../src/errors.ts';
import type { CallOutcome } from './answers.ts';
import { toFailure } from './engine-protocol.ts';
import { isOperationName, type OperationHandlers, operations } from './operations.ts';

/**
 * The gate every call from a page goes through, whichever host carries it: the name must be in the table and the
 * input must be of its schema; what the handler throws becomes plain data.
 * @param onFault told of errors that are the program's own
 */
export async function callOperation(
  handlers: OperationHandlers,
  name: unknown,
  input: unknown,
  onFault: (error: unknown) => void,
): Promise<CallOutcome> {
  if (typeof name !== 'string' || !isOperationName(name))
    return refused(`There is no operation of this name: ${String(name).slice(0, 60)}.`);
  const parsed = operations[name].input.safeParse(input);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    return refused(`${name} refuses ${issue?.path.join('.') || 'its input'}: ${issue?.message ?? 'wrong'}.`);
  }
  try {
    const handler = handlers[name] as (input: unknown) => Promise<unknown>;
    return { ok: true, output: await handler(parsed.data) };
  } catch (error) {
    const isExpected = error instanceof InputError || error instanceof CancelledError;
    if (!isExpected) onFault(error);
    return { ok: false, kind: isExpected ? 'failed' : 'fault', failure: toFailure(error) };
  }
}

function refused(message: string): CallOutcome {
  return { ok: false, kind: 'refused', failure: { name: 'Error', message } };
}
