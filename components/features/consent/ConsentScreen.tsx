/**
 * Recording a signed consent: which version, when, and what was talked through, point by point.
 */
import { useLocalSearchParams, useRouter } from 'expo-router';
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Form } from '@/components/forms/Form';
import { FormCheckboxField, FormDateField, FormNumberField, FormSelectField, FormTextAreaField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { useSigned } from '@/components/forms/use-signed';
import { RecordShell } from '@/components/features/participant/pictures/RecordShell';
import { usePages, useRead } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { LoadingState } from '@/components/ui/States';
import { space } from '@/components/ui/theme';
import { readParticipant } from '@/shared/contracts/participant';
import { recordConsent } from '@/shared/contracts/readiness';
import { listProtocols } from '@/shared/contracts/site';

const points = ['understandsPurpose', 'understandsRisks', 'understandsMayStop', 'agreesToDataUse', 'agreesToPhotos', 'questionsAnswered', 'copyGiven'] as const;

export function ConsentScreen() {
  const { t } = useTranslation('forms');
  const { participantId = '' } = useLocalSearchParams<{ participantId: string }>();
  const person = useRead(readParticipant, { params: { participantId } });
  const siteId = person.data?.siteId;
  const protocols = usePages(listProtocols, { query: { ...(siteId ? { siteId } : {}) }, enabled: siteId !== undefined });
  const version = protocols.data?.pages[0]?.items[0]?.settings.consentVersion;
  return (
    <RecordShell title={t('consent.title')} participantId={participantId} name={person.data?.name ?? ''} lead={t('consent.lead')}>
      {version === undefined ? <LoadingState lines={8} /> : <ConsentForm participantId={participantId} version={version} />}
    </RecordShell>
  );
}

function ConsentForm({ participantId, version }: { participantId: string; version: number }) {
  const { t } = useTranslation('forms');
  const router = useRouter();
  const [key] = useState(() => crypto.randomUUID());
  const form = useContractForm(recordConsent.body, {
    kind: 'own',
    documentVersion: version,
    signedOn: '',
    understandsPurpose: false,
    understandsRisks: false,
    understandsMayStop: false,
    agreesToDataUse: false,
    agreesToPhotos: false,
    questionsAnswered: false,
    copyGiven: false,
  });
  const { failed, send } = useSigned(recordConsent, form, {
    input: (body) => ({ params: { participantId }, body, key }),
    onDone: () => router.replace({ pathname: '/participants/[participantId]', params: { participantId } }),
  });
  return (
    <Form onSubmit={send} label={t('consent.title')}>
      {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
      <Card heading={t('consent.paper')}>
        <View style={{ gap: space[4] }}>
          <FormSelectField name="kind" control={form.control} label={t('consent.kind')} options={recordConsent.body.shape.kind.unwrap().options.map((value) => ({ value, label: t(`consent.kinds.${value}`) }))} />
          <FormNumberField name="documentVersion" control={form.control} label={t('consent.version')} hint={t('consent.versionHint', { version })} />
          <FormDateField name="signedOn" control={form.control} label={t('consent.signedOn')} />
        </View>
      </Card>
      <Card heading={t('consent.points')}>
        <View style={{ gap: space[3] }}>
          {points.map((point) => (
            <FormCheckboxField key={point} name={point} control={form.control} label={t(`consent.point.${point}`)} />
          ))}
          <FormTextAreaField name="remark" control={form.control} label={t('remark')} emptyAs="absent" rows={2} />
        </View>
      </Card>
      <View style={{ alignItems: 'flex-start' }}>
        <Button label={t('consent.go')} size="large" busy={form.formState.isSubmitting} onPress={send} />
      </View>
    </Form>
  );
}
