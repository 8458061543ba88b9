/**
 * Giving supplies of one lot. The earlier ones of that kind end with it.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Form } from '@/components/forms/Form';
import { FormDateField, FormSelectField, FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { useSigned } from '@/components/forms/use-signed';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { useToast } from '@/components/ui/Toast';
import { giveSupply } from '@/shared/contracts/device';

export function GiveSupplyForm({ participantId }: { participantId: string }) {
  const { t } = useTranslation('equipment');
  const toast = useToast();
  const [key, setKey] = useState(() => crypto.randomUUID());
  const form = useContractForm(giveSupply.body, { kind: 'sponge', lot: '', openedOn: '' });
  const { failed, send } = useSigned(giveSupply, form, {
    input: (body) => ({ params: { participantId }, body, key }),
    onDone: () => {
      toast.show({ text: t('give.kept'), tone: 'steady' });
      form.reset();
      setKey(crypto.randomUUID());
    },
  });
  return (
    <Card heading={t('give.title')} note={t('give.note')}>
      <Form onSubmit={send} label={t('give.title')}>
        {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
        <FormSelectField name="kind" control={form.control} label={t('supplies.kind')} options={giveSupply.body.shape.kind.options.map((value) => ({ value, label: t(`supplies.kinds.${value}`) }))} />
        <FormTextField name="lot" control={form.control} label={t('supplies.lot')} autoComplete="off" />
        <FormDateField name="openedOn" control={form.control} label={t('supplies.openedOn')} />
        <View style={{ alignItems: 'flex-start' }}>
          <Button label={t('give.go')} busy={form.formState.isSubmitting} onPress={send} />
        </View>
      </Form>
    </Card>
  );
}
