/**
 * The form of a prescription beside what it means. A draft is written; signing is the next step.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import type { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormTextAreaField } from '@/components/forms/fields';
import { useContractForm } from '@/components/forms/use-contract-form';
import { useSigned } from '@/components/forms/use-signed';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { space, useTheme } from '@/components/ui/theme';
import type { ParticipantView } from '@/shared/contracts/participant';
import { writePrescription, type PrescriptionView } from '@/shared/contracts/prescription';
import type { ProtocolSettings } from '@/shared/values/protocol-settings';
import { addDays, localMoment } from '@/shared/values/zone';
import { ChangesCard } from './ChangesCard';
import { DoseFields } from './DoseFields';
import { MeaningColumn } from './MeaningColumn';
import { ScheduleFields } from './ScheduleFields';

export type PrescriptionInput = z.input<typeof writePrescription.body>;

export interface PrescriptionEditorProps {
  person: ParticipantView;
  inForce: PrescriptionView | null;
  /** An unsigned draft to go on with. */
  draft: PrescriptionView | null;
  settings: ProtocolSettings;
  /** The server's clock. */
  now: string;
  onWritten(): void;
}

/** A usual course to start from: 2 mA, 20 min, 35 cm² pads, weekdays for four weeks (common practice; Bikson et al. 2009 for the pads). */
const usualDays = 60;
const usual = {
  dose: {
    waveform: 'tDCS' as const,
    intensityMilliamp: 2,
    rampUpSeconds: 30,
    holdSeconds: 1200,
    rampDownSeconds: 30,
    electrodes: [
      { position: 'F3', polarity: 'anode' as const, shape: 'pad' as const, areaSquareCentimetre: 35, share: 1 },
      { position: 'Fp2', polarity: 'cathode' as const, shape: 'pad' as const, areaSquareCentimetre: 35, share: 1 },
    ],
  },
  schedule: { days: [1, 2, 3, 4, 5], hoursFrom: '07:00', hoursTo: '22:00', sessionsTotal: 20, minGapHours: 20, maxPerDay: 1, maxPer7Days: 5, makeUpMissed: true },
};

function startFrom({ person, inForce, draft }: PrescriptionEditorProps, today: string): PrescriptionInput {
  const base = draft ?? inForce;
  const schedule = base ? { ...base.schedule, startsOn: base.schedule.startsOn < today ? today : base.schedule.startsOn } : { ...usual.schedule, startsOn: today, expiresOn: addDays(today, usualDays) };
  return {
    participantId: person.id,
    amendsId: inForce?.id ?? null,
    reason: draft?.reason ?? (inForce ? '' : null),
    dose: base?.dose ?? usual.dose,
    schedule,
    assisted: base?.assisted ?? false,
  };
}

export function PrescriptionEditor(props: PrescriptionEditorProps) {
  const { person, inForce, settings, now, onWritten } = props;
  const { t } = useTranslation('prescription');
  const { rem } = useTheme();
  const [key] = useState(() => crypto.randomUUID());
  const today = localMoment(Date.parse(now), person.zone).date;
  const form = useContractForm(writePrescription.body, startFrom(props, today));
  const { failed, send } = useSigned(writePrescription, form, { input: (body) => ({ body, key: `${key}:${JSON.stringify(body).length}` }), onDone: onWritten });
  const value = form.watch();
  return (
    <View style={{ flexDirection: 'row', flexWrap: 'wrap', gap: space[8], alignItems: 'flex-start' }}>
      <View style={{ flexGrow: 1, flexShrink: 1, flexBasis: rem(30), minWidth: 0 }}>
        <Form onSubmit={send} label={t(inForce ? 'amendTitle' : 'title')}>
          {failed ? <Notice tone="stop" title={failed} announce="assertive" /> : null}
          <DoseFields control={form.control} />
          <ScheduleFields control={form.control} />
          {inForce ? (
            <>
              <ChangesCard before={inForce} after={value} />
              <FormTextAreaField name="reason" control={form.control} label={t('reason')} rows={3} />
            </>
          ) : null}
          <View style={{ alignItems: 'flex-start' }}>
            <Button label={t('write')} size="large" reason={t('writeNote')} busy={form.formState.isSubmitting} onPress={send} />
          </View>
        </Form>
      </View>
      <MeaningColumn value={value} before={inForce} ageYears={person.ageYears} limits={settings.limits} />
    </View>
  );
}
