/**
 * Adding a site. Whoever adds it belongs to it.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Form } from '@/components/forms/Form';
import { FormSelectField, FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { useSigned } from '@/components/forms/use-signed';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { useToast } from '@/components/ui/Toast';
import { addSite } from '@/shared/contracts/site';

const kinds = ['service', 'research'] as const;

export function AddSiteForm() {
  const { t } = useTranslation('site');
  const toast = useToast();
  const [key, setKey] = useState(() => crypto.randomUUID());
  const form = useContractForm(addSite.body, { name: '', code: '', kind: 'service', phone: '', emergencyNumber: '', zone: '' });
  const { failed, send } = useSigned(addSite, form, {
    input: (body) => ({ body, key }),
    onDone: (made) => {
      toast.show({ text: t('added', { name: made.name }), tone: 'steady' });
      form.reset();
      setKey(crypto.randomUUID());
    },
  });
  return (
    <Card heading={t('add')}>
      <Form onSubmit={send} label={t('add')}>
        {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
        <FormTextField name="name" control={form.control} label={t('siteName')} autoComplete="off" />
        <FormTextField name="code" control={form.control} label={t('code')} hint={t('codeHint')} autoComplete="off" />
        <FormSelectField name="kind" control={form.control} label={t('kindLabel')} options={kinds.map((value) => ({ value, label: t(`kind.${value}`) }))} />
        <FormTextField name="phone" control={form.control} label={t('phone')} keyboard="phone-pad" autoComplete="off" />
        <FormTextField name="emergencyNumber" control={form.control} label={t('emergency')} keyboard="number-pad" autoComplete="off" />
        <FormSelectField name="zone" control={form.control} label={t('zone')} placeholder={t('zonePlaceholder')} options={Intl.supportedValuesOf('timeZone').map((zone) => ({ value: zone, label: zone }))} />
        <View style={{ alignItems: 'flex-start' }}>
          <Button kind="secondary" label={t('addGo')} busy={form.formState.isSubmitting} onPress={send} />
        </View>
      </Form>
    </Card>
  );
}
