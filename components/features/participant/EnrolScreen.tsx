/**
 * Enrolling a person: who they are, how to reach them, whom to call for them. The invitation goes by mail.
 */
import { useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Form } from '@/components/forms/Form';
import { FormDateField, FormSelectField, FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { StaffShell } from '@/components/layout/StaffShell';
import { ApiProblem, useCall } from '@/components/runtime/api';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { LoadingState } from '@/components/ui/States';
import { useToast } from '@/components/ui/Toast';
import { space } from '@/components/ui/theme';
import type { Me } from '@/shared/contracts/account';
import { enrolParticipant } from '@/shared/contracts/participant';

const formRem = 46;

export function EnrolScreen() {
  const { t } = useTranslation('participants');
  const me = useMe();
  return (
    <StaffShell title={t('enrolTitle')} place="participants" maxRem={formRem} crumbs={[{ label: t('title'), href: '/participants' }]} subtitle={t('enrolLead')}>
      {me ? <EnrolForm me={me} /> : <LoadingState lines={8} />}
    </StaffShell>
  );
}

function EnrolForm({ me }: { me: Me }) {
  const { t } = useTranslation('participants');
  const router = useRouter();
  const toast = useToast();
  const enrol = useCall(enrolParticipant);
  const [key] = useState(() => crypto.randomUUID());
  const [failed, setFailed] = useState<string | null>(null);
  const form = useContractForm(enrolParticipant.body, {
    siteId: me.sites[0]?.id ?? '',
    name: '',
    email: '',
    phone: '',
    bornOn: '',
    zone: me.sites[0]?.zone ?? '',
    language: 'en',
    emergencyContact: { name: '', phone: '' },
  });
  const zones = Intl.supportedValuesOf('timeZone');

  const send = form.handleSubmit(async (body) => {
    setFailed(null);
    try {
      const made = await enrol.mutateAsync({ body, key });
      toast.show({ text: t('enrolled', { name: body.name, email: body.email }), tone: 'steady' });
      router.replace({ pathname: '/participants/[participantId]', params: { participantId: made.id } });
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      const left = form.showServerFields(error.problem.fields);
      if (!error.problem.fields?.length || left.length) setFailed(error.offline ? t('offline') : error.problem.detail);
    }
  });

  return (
    <Form onSubmit={() => void send()} label={t('enrolTitle')}>
      {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
      <Card heading={t('person')}>
        <View style={{ gap: space[4] }}>
          {me.sites.length > 1 ? <FormSelectField name="siteId" control={form.control} label={t('site')} options={me.sites.map((site) => ({ value: site.id, label: site.name }))} /> : null}
          <FormTextField name="name" control={form.control} label={t('name')} autoComplete="off" />
          <FormDateField name="bornOn" control={form.control} label={t('bornOn')} />
          <FormSelectField name="zone" control={form.control} label={t('zone')} hint={t('zoneHint')} options={zones.map((zone) => ({ value: zone, label: zone }))} />
        </View>
      </Card>
      <Card heading={t('reach')}>
        <View style={{ gap: space[4] }}>
          <FormTextField name="email" control={form.control} label={t('email')} hint={t('emailHint')} keyboard="email-address" autoComplete="off" />
          <FormTextField name="phone" control={form.control} label={t('phone')} keyboard="phone-pad" autoComplete="off" />
        </View>
      </Card>
      <Card heading={t('emergency')}>
        <View style={{ gap: space[4] }}>
          <FormTextField name="emergencyContact.name" control={form.control} label={t('emergencyName')} autoComplete="off" />
          <FormTextField name="emergencyContact.phone" control={form.control} label={t('emergencyPhone')} keyboard="phone-pad" autoComplete="off" />
        </View>
      </Card>
      <View style={{ alignItems: 'flex-start' }}>
        <Button label={t('enrolGo')} size="large" busy={form.formState.isSubmitting} onPress={() => void send()} />
      </View>
    </Form>
  );
}
