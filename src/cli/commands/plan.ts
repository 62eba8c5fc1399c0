import { InputError } from '../../errors.ts';
/** tmp */
export async function plan(_testPath: string, _options: { readonly json?: true }): Promise<number> {
  throw new InputError('plan');
}
