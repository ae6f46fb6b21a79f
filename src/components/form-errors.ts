import type { FieldError, FieldValues, Path, UseFormReturn } from 'react-hook-form';
import { ApiError, errorText } from '../api/client';

/**
 * Puts what the server said about a field beside that field (its error's type is `server`), and anything else it
 * said into `errors.root.server`, for the form to show. Both go when the form is sent again.
 */
export function placeErrors<Values extends FieldValues>(
  form: Pick<UseFormReturn<Values>, 'setError' | 'getValues'>,
  error: unknown,
): void {
  const said = error instanceof ApiError ? error.errors : [];
  const fields = form.getValues();
  const placeable = said.filter(({ path }) => path in fields);
  placeable.forEach(({ path, message }, i) => {
    form.setError(path as Path<Values>, { type: 'server', message }, { shouldFocus: i === 0 });
  });
  if (said.length === 0 || placeable.length < said.length)
    form.setError('root.server', { type: 'server', message: errorText(error) });
}

/** What is wrong with a new password: the server's objection in its words, else the rule. */
export function passwordError(error: FieldError | undefined): string | undefined {
  if (!error) return undefined;
  return error.type === 'server' ? error.message : 'Use at least 10 characters (and at most 200).';
}
