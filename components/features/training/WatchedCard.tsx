/**
 * A session that somebody watched, or somebody watching now: the first ones are not done alone.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall } from '@/components/runtime/api';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { SelectField, TextAreaField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { space } from '@/components/ui/theme';
import { recordWatchedSession } from '@/shared/contracts/readiness';
import type { BodyIn } from '@/shared/contracts/contract';

type Watched = BodyIn<typeof recordWatchedSession>;
const places = ['clinic', 'live_video'] as const;
const whens = ['done', 'now'] as const;
const tolerated = ['well', 'with_discomfort', 'not_tolerated'] as const;

export function WatchedCard({ participantId, done, required }: { participantId: string; done: number; required: number }) {
  const { t } = useTranslation('forms');
  const record = useCall(recordWatchedSession);
  const [body, setBody] = useState<Watched>({ where: 'clinic', when: 'done', tolerated: 'well' });
  const options = <T extends string>(kind: string, values: readonly T[]) => values.map((value) => ({ value, label: t(`watched.${kind}.${value}`) }));
  return (
    <Card heading={t('watched.title')} note={t('watched.note', { done, required })}>
      <View style={{ gap: space[4] }}>
        {record.data ? <Notice tone="steady" title={t('watched.kept', { watched: record.data.watched, required: record.data.required })} announce="polite" /> : null}
        {record.error ? <Notice tone="stop" title={record.error.offline ? t('common:notSent') : record.error.problem.detail} announce="assertive" /> : null}
        <SelectField label={t('watched.whenLabel')} value={body.when} onChange={(when) => when && setBody({ ...body, when })} options={options('when', whens)} />
        <SelectField label={t('watched.whereLabel')} value={body.where} onChange={(where) => where && setBody({ ...body, where })} options={options('where', places)} />
        {body.when === 'done' ? (
          <>
            <SelectField label={t('watched.toleratedLabel')} value={body.tolerated ?? ''} onChange={(value) => value && setBody({ ...body, tolerated: value })} options={options('tolerated', tolerated)} />
            <TextAreaField label={t('remark')} value={body.remark ?? ''} onChange={(remark) => setBody({ ...body, remark: remark === '' ? undefined : remark })} rows={2} />
          </>
        ) : null}
        <View style={{ alignItems: 'flex-start' }}>
          <Button
            kind="secondary"
            label={t('watched.go')}
            busy={record.isPending}
            onPress={() => record.mutate({ params: { participantId }, body: body.when === 'now' ? { where: body.where, when: 'now' } : body, key: crypto.randomUUID() })}
          />
        </View>
      </View>
    </Card>
  );
}
