// Sending a contract's form: the server's findings go onto their fields, whatever belongs to none is said above the form.

import { useState } from 'react';
import type { FieldValues } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { ApiProblem, useCall, type CallInput } from '@/components/runtime/api';
import type { AnswerOf, ContractShape } from '@/shared/contracts/contract';
import type { ContractForm } from './use-contract-form';

export interface SendPlan<C extends ContractShape, Output> {
  input(body: Output): CallInput<C>;
  onDone(answer: AnswerOf<C>): void;
}

/** @returns `failed`: what to say above the form, or null; `send`: checks and sends. */
export function useSigned<C extends ContractShape, Input extends FieldValues, Output>(contract: C, form: ContractForm<Input, Output>, plan: SendPlan<C, Output>) {
  const { t } = useTranslation('common');
  const call = useCall(contract);
  const [failed, setFailed] = useState<string | null>(null);
  const handle = form.handleSubmit(async (body) => {
    setFailed(null);
    try {
      plan.onDone(await call.mutateAsync(plan.input(body)));
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      const { problem, offline } = error;
      const left = form.showServerFields(problem.fields);
      if (offline) setFailed(t('notSent'));
      else if (left.length > 0) setFailed([problem.detail, ...left.map((field) => field.message)].join(' '));
      else if (!problem.fields?.length) setFailed(problem.detail);
    }
  });
  return { failed, send: () => void handle() };
}
