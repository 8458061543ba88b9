/**
 * The page round a form about one person: the way here, whose record it is, a width that can be read.
 */
import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { StaffShell } from '@/components/layout/StaffShell';

export interface RecordShellProps {
  title: string;
  participantId: string;
  name: string;
  lead?: string;
  /** In rem; forms keep to a width that can be read. */
  maxRem?: number;
  children: ReactNode;
}

const formRem = 46;

export function RecordShell({ title, participantId, name, lead, maxRem = formRem, children }: RecordShellProps) {
  const { t } = useTranslation('common');
  return (
    <StaffShell
      title={title}
      place="participants"
      maxRem={maxRem}
      {...(lead ? { subtitle: lead } : {})}
      crumbs={[
        { label: t('nav.participants'), href: '/participants' },
        { label: name, href: { pathname: '/participants/[participantId]', params: { participantId } } },
      ]}
    >
      {children}
    </StaffShell>
  );
}
