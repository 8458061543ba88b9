/**
 * Registering a stimulator.
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
import type { Me } from '@/shared/contracts/account';
import { addDevice } from '@/shared/contracts/device';

export function AddDeviceForm({ sites }: { sites: Me['sites'] }) {
  const { t } = useTranslation('equipment');
  const toast = useToast();
  const [key, setKey] = useState(() => crypto.randomUUID());
  const form = useContractForm(addDevice.body, { siteId: sites[0]?.id ?? '', label: '', model: '', serial: '', firmware: '', calibrationDueOn: '' });
  const { failed, send } = useSigned(addDevice, form, {
    input: (body) => ({ body, key }),
    onDone: () => {
      toast.show({ text: t('register.added'), tone: 'steady' });
      form.reset();
      setKey(crypto.randomUUID());
    },
  });
  return (
    <Card heading={t('register.add')}>
      <Form onSubmit={send} label={t('register.add')}>
        {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
        {sites.length > 1 ? <FormSelectField name="siteId" control={form.control} label={t('register.site')} options={sites.map((site) => ({ value: site.id, label: site.name }))} /> : null}
        <FormTextField name="label" control={form.control} label={t('register.label')} autoComplete="off" />
        <FormTextField name="model" control={form.control} label={t('register.model')} autoComplete="off" />
        <FormTextField name="serial" control={form.control} label={t('register.serial')} autoComplete="off" />
        <FormTextField name="firmware" control={form.control} label={t('register.firmware')} autoComplete="off" />
        <FormDateField name="calibrationDueOn" control={form.control} label={t('register.calibration')} />
        <View style={{ alignItems: 'flex-start' }}>
          <Button kind="secondary" label={t('register.addGo')} busy={form.formState.isSubmitting} onPress={send} />
        </View>
      </Form>
    </Card>
  );
}
