/**
 * A file of worked cases, chosen and run, and its signed result as a file. It must not read the file but as text.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall } from '@/components/runtime/api';
import { saveFile } from '@/components/runtime/save-file';
import { Button } from '@/components/ui/Button';
import { FilePicker } from '@/components/ui/FilePicker';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { space } from '@/components/ui/theme';
import type { AnswerOf } from '@/shared/contracts/contract';
import type { Problem } from '@/shared/contracts/problem';
import { runQualification } from '@/shared/contracts/qualification';

type Ran = AnswerOf<typeof runQualification>;

/** The whole request is 1 MB at most, and text grows a little on its way (own choice). */
const bytesMost = 800_000;

/** Of a field the field's own sentence: it says what is wrong with the file. */
function sentenceOf({ fields, detail }: Problem): string {
  return fields?.[0]?.message ?? detail;
}

export function RunForm({ siteId, siteName }: { siteId: string; siteName: string }) {
  const { t } = useTranslation('qualification');
  const run = useCall(runQualification);
  const [file, setFile] = useState<File | null>(null);
  const isTooLarge = file !== null && file.size > bytesMost;

  async function start(): Promise<void> {
    if (file === null) return;
    run.mutate({ body: { siteId, fileName: file.name, content: await file.text() } });
  }

  return (
    <View style={{ gap: space[3], alignItems: 'flex-start' }}>
      <FilePicker
        label={t('choose', { site: siteName })}
        chosenName={file?.name ?? null}
        accept="application/json,.json"
        onChoose={(chosen) => {
          setFile(chosen);
          run.reset();
        }}
      />
      {isTooLarge ? (
        <Text tone="stop" role="alert">
          {t('tooLarge')}
        </Text>
      ) : null}
      <Button
        label={t('run')}
        accessibleLabel={t('runAt', { site: siteName })}
        disabled={file === null || isTooLarge}
        busy={run.isPending}
        onPress={() => void start()}
      />
      {run.error ? (
        <Notice
          tone="stop"
          title={run.error.offline ? t('common:notSent') : sentenceOf(run.error.problem)}
          announce="assertive"
        />
      ) : null}
      {run.data ? <Outcome ran={run.data} /> : null}
    </View>
  );
}

function Outcome({ ran }: { ran: Ran }) {
  const { t } = useTranslation('qualification');
  const { passed, failed, fileName } = ran.run;
  const name = t('resultName', { file: fileName.replace(/\.json$/i, '') });
  return (
    <Notice
      tone={failed === 0 ? 'steady' : 'stop'}
      title={t(failed === 0 ? 'allPassed' : 'someFailed', { passed, failed })}
      announce="assertive"
      actions={<Button kind="secondary" label={t('download')} onPress={() => saveFile(name, 'application/json', ran.signed)} />}
    >
      {ran.failures.map(({ id, error }, index) => (
        <Text key={`${index} ${id}`} size="fine">
          {error === null ? t('caseFailed', { id }) : t('caseUnknown', { id, error })}
        </Text>
      ))}
      {failed > ran.failures.length ? (
        <Text size="fine">{t('others', { count: failed - ran.failures.length })}</Text>
      ) : null}
      <Text size="fine">{t('downloadHelp')}</Text>
    </Notice>
  );
}
