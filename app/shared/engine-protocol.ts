import { CancelledError, InputError } from '../../src/errors.ts';
import type { Failure } from './answers.ts';
import type { EngineCallName, EngineCalls } from './engine.ts';

/** From the bench to the engine's thread. */
export type ToEngine =
  | { readonly kind: 'call'; readonly id: number; readonly name: EngineCallName; readonly args: unknown }
  | { readonly kind: 'cancel'; readonly id: number };

/** From the engine's thread to the bench. */
export type FromEngine =
  | { readonly kind: 'progress'; readonly id: number; readonly progress: unknown }
  | { readonly kind: 'answer'; readonly id: number; readonly answer: unknown }
  | { readonly kind: 'failure'; readonly id: number; readonly failure: Failure };

/** An error as plain data. */
export function toFailure(error: unknown): Failure {
  if (error instanceof InputError || error instanceof CancelledError)
    return { name: error.name, message: error.message };
  return { name: 'Error', message: error instanceof Error ? error.message : String(error) };
}

/** The error again, of the kind it was. */
export function fromFailure(failure: Failure): Error {
  if (failure.name === 'InputError') return new InputError(failure.message);
  if (failure.name === 'CancelledError') return new CancelledError();
  return new Error(failure.message);
}

/** What the engine's thread implements. */
export type EngineHandlers = {
  readonly [N in EngineCallName]: (
    args: EngineCalls[N]['args'],
    context: { readonly signal: AbortSignal; readonly progress: (value: EngineCalls[N]['progress']) => void },
  ) => Promise<EngineCalls[N]['answer']>;
};
