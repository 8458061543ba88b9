/**
 * Inviting a member of staff to an own site.
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
import { inviteStaff } from '@/shared/contracts/site';

export function InviteStaffForm({ sites }: { sites: readonly { value: string; label: string }[] }) {
  const { t } = useTranslation('site');
  const toast = useToast();
  const [key, setKey] = useState(() => crypto.randomUUID());
  const form = useContractForm(inviteStaff.body, { email: '', name: '', role: 'coordinator', siteId: sites[0]?.value ?? '' });
  const { failed, send } = useSigned(inviteStaff, form, {
    input: (body) => ({ body, key }),
    onDone: (made) => {
      toast.show({ text: t('invited', { email: made.email }), tone: 'steady' });
      form.reset();
      setKey(crypto.randomUUID());
    },
  });
  return (
    <Card heading={t('invite')}>
      <Form onSubmit={send} label={t('invite')}>
        {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
        <FormTextField name="name" control={form.control} label={t('name')} autoComplete="off" />
        <FormTextField name="email" control={form.control} label={t('email')} keyboard="email-address" autoComplete="off" />
        <FormSelectField name="role" control={form.control} label={t('role')} options={inviteStaff.body.shape.role.options.map((value) => ({ value, label: t(`public:role.${value}`) }))} />
        <FormSelectField name="siteId" control={form.control} label={t('site')} options={sites} />
        <View style={{ alignItems: 'flex-start' }}>
          <Button kind="secondary" label={t('inviteGo')} busy={form.formState.isSubmitting} onPress={send} />
        </View>
      </Form>
    </Card>
  );
}
