/**
 * A form whose shape is a contract's schema: checked before it is sent, and the server's own findings put on the fields
 * they belong to, with the focus on the first. It must not send anything: the screen's call does.
 */
import { zodResolver } from '@hookform/resolvers/zod';
import { useCallback } from 'react';
import { useForm, type DefaultValues, type FieldPath, type FieldValues, type UseFormReturn } from 'react-hook-form';
import type { z } from 'zod';
import { messageOfField, messageOfIssue } from '@/components/forms/words-of-issue';

/** One entry of `fields` in a problem+json answer. `path` is dotted or a JSON pointer. */
export interface ServerField {
  path: string;
  code?: string;
  message: string;
}

export type ContractForm<Input extends FieldValues, Output> = UseFormReturn<Input, unknown, Output> & {
  /**
   * Puts the server's findings on the form and goes to the first. Gives back those that belong to no field here, so
   * that the screen can show them: none may be lost.
   */
  showServerFields(fields: readonly ServerField[] | undefined): ServerField[];
};

/** '/montage/anode' and 'body.montage.anode' name the same field as 'montage.anode'. */
function pathInForm(path: string): string {
  const dotted = path.startsWith('/') ? path.slice(1).replaceAll('/', '.') : path;
  return dotted.replace(/^body\./, '').replace(/\[(\d+)\]/g, '.$1');
}

export function useContractForm<Input extends FieldValues, Output>(
  schema: z.ZodType<Output, Input>,
  defaultValues: DefaultValues<Input>,
): ContractForm<Input, Output> {
  const form = useForm<Input, unknown, Output>({
    resolver: zodResolver(schema, { error: messageOfIssue }),
    defaultValues,
    mode: 'onTouched',
    shouldFocusError: true,
  });
  const { setError, control } = form;

  const showServerFields = useCallback(
    (fields: readonly ServerField[] | undefined) => {
      const known = new Set<string>(control._names.mount);
      const left: ServerField[] = [];
      let isFirst = true;
      for (const field of fields ?? []) {
        const path = pathInForm(field.path);
        const name = [...known].find((mounted): mounted is FieldPath<Input> => mounted === path);
        if (name === undefined) {
          left.push(field);
          continue;
        }
        setError(name, { type: field.code ?? 'server', message: messageOfField(field) }, { shouldFocus: isFirst });
        isFirst = false;
      }
      return left;
    },
    [control, setError],
  );
  return { ...form, showServerFields };
}
