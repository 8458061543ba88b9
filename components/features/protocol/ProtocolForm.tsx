/**
 * A new version of a protocol, signed with the password. A limit above its ceiling is refused by the server, with the field named.
 */
import { useState } from 'react';
import { useFieldArray } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { Form } from '@/components/forms/Form';
import { FormCheckboxField, FormNumberField, FormPasswordField, FormTextField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { useSigned } from '@/components/forms/use-signed';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { useToast } from '@/components/ui/Toast';
import { space } from '@/components/ui/theme';
import { changeProtocol } from '@/shared/contracts/site';
import { ceilingText, limitFields } from './protocol-rows';
import type { ProtocolBase } from './ProtocolsScreen';

const terms = ['consentVersion', 'screeningValidDays', 'trainingValidDays', 'watchedSessionsRequired', 'retentionYears'] as const;
const mostContacts = 10;
const nobody = { name: '', email: '', phone: '' };

export function ProtocolForm({ protocol, onDone }: { protocol: ProtocolBase; onDone(): void }) {
  const { t } = useTranslation('protocol');
  const format = useFormat();
  const toast = useToast();
  const [key] = useState(() => crypto.randomUUID());
  const form = useContractForm(changeProtocol.body, { siteId: protocol.siteId, basedOnVersion: protocol.version, settings: protocol.settings, reason: '', password: '' });
  const contacts = useFieldArray({ control: form.control, name: 'settings.contacts' });
  const title = t(protocol.version === 0 ? 'firstTitle' : 'formTitle', { site: protocol.siteName });
  const { failed, send } = useSigned(changeProtocol, form, {
    input: (body) => ({ body, key }),
    onDone: (signed) => {
      toast.show({ text: t('signed', { version: signed.version }), tone: 'steady' });
      onDone();
    },
  });
  return (
    <Card heading={title} note={t('formNote')}>
      <Form onSubmit={send} label={title}>
        {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
        <Text heading={3}>{t('limits')}</Text>
        {limitFields.map(({ field, ceiling, unit }) => (
          <FormNumberField
            key={field}
            name={`settings.limits.${field}`}
            control={form.control}
            label={t(`limit.${field}`)}
            unit={unit}
            {...(ceiling ? { hint: ceilingText(ceiling, format, t) } : {})}
          />
        ))}
        <FormCheckboxField name="settings.limits.allowsRings" control={form.control} label={t('limit.allowsRings')} />
        <Text heading={3}>{t('terms')}</Text>
        {terms.map((term) => (
          <FormNumberField key={term} name={`settings.${term}`} control={form.control} label={t(`term.${term}`)} />
        ))}
        <FormNumberField name="settings.moodCheckEveryDays" control={form.control} label={t('term.moodCheckEveryDays')} hint={t('moodHint')} />
        <FormCheckboxField name="settings.excludesPregnancy" control={form.control} label={t('term.excludesPregnancy')} />
        <Text heading={3}>{t('contacts')}</Text>
        <Text tone="muted">{t('contactsHelp')}</Text>
        {contacts.fields.map((contact, index) => (
          <View key={contact.id} style={{ gap: space[3] }}>
            <FormTextField name={`settings.contacts.${index}.name`} control={form.control} label={t('contactName', { number: index + 1 })} autoComplete="off" />
            <FormTextField name={`settings.contacts.${index}.email`} control={form.control} label={t('contactEmail', { number: index + 1 })} autoComplete="off" />
            <FormTextField name={`settings.contacts.${index}.phone`} control={form.control} label={t('contactPhone', { number: index + 1 })} autoComplete="off" />
            {contacts.fields.length > 1 ? <Button kind="quiet" size="small" label={t('contactRemove', { number: index + 1 })} onPress={() => contacts.remove(index)} /> : null}
          </View>
        ))}
        {contacts.fields.length < mostContacts ? <Button kind="quiet" size="small" label={t('contactAdd')} onPress={() => contacts.append(nobody)} /> : null}
        <FormTextField name="reason" control={form.control} label={t('reason')} autoComplete="off" />
        <FormPasswordField name="password" control={form.control} label={t('password')} />
        <Text size="small" tone="muted">
          {t('meaning')}
        </Text>
        <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[3] }}>
          <Button kind="secondary" label={t('back')} onPress={onDone} />
          <Button label={t('sign', { version: protocol.version + 1 })} busy={form.formState.isSubmitting} onPress={send} />
        </View>
      </Form>
    </Card>
  );
}
