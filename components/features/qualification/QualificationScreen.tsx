/**
 * Site → Qualification: what came of each site's last run of worked cases, and for an administrator a new one. It judges nothing: the
 * server runs the cases against the rules that it decides with.
 */
import { useTranslation } from 'react-i18next';
import { StaffShell } from '@/components/layout/StaffShell';
import { usePages, useRead } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { useMe } from '@/components/runtime/me';
import { Button } from '@/components/ui/Button';
import { Card } from '@/components/ui/Card';
import { Definition } from '@/components/ui/Definition';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Tag } from '@/components/ui/Tag';
import { Text } from '@/components/ui/Text';
import { readQualification, type QualificationRun } from '@/shared/contracts/qualification';
import { listSites } from '@/shared/contracts/site';
import { RunForm } from './RunForm';

export function QualificationScreen() {
  const { t } = useTranslation('qualification');
  const me = useMe();
  const sites = usePages(listSites, { query: {} });
  const last = useRead(readQualification);
  const all = sites.data?.pages.flatMap((page) => page.items) ?? [];
  const mayRun = me?.account.role === 'administrator';
  const failed = [sites, last].find((read) => read.isError && read.data === undefined);
  const runOf = (siteId: string) => last.data?.runs.find((run) => run.siteId === siteId);
  return (
    <StaffShell
      title={t('title')}
      place="site"
      subtitle={t('lead')}
      crumbs={[{ label: t('site'), href: '/site' }, { label: t('title') }]}
    >
      {failed ? <FailedState onRetry={() => void failed.refetch()} /> : null}
      {!failed && (sites.isPending || last.isPending) ? <LoadingState lines={5} /> : null}
      {sites.data && last.data && all.length === 0 ? <EmptyState title={t('noSite')} /> : null}
      {sites.data && last.data
        ? all.map((site) => (
            <Card key={site.id} heading={site.name}>
              <LastRun run={runOf(site.id)} />
              {mayRun ? <RunForm siteId={site.id} siteName={site.name} /> : null}
            </Card>
          ))
        : null}
      {sites.hasNextPage ? <Button kind="quiet" label={t('more')} onPress={() => void sites.fetchNextPage()} /> : null}
    </StaffShell>
  );
}

function LastRun({ run }: { run: QualificationRun | undefined }) {
  const { t } = useTranslation('qualification');
  const format = useFormat();
  if (!run) return <EmptyState title={t('never')}>{t('neverHelp')}</EmptyState>;
  const hash = (text: string) => (
    <Text size="fine" digits>
      {text}
    </Text>
  );
  return (
    <>
      <Tag
        tone={run.failed === 0 ? 'steady' : 'stop'}
        label={t(run.failed === 0 ? 'allPassed' : 'someFailed', { passed: run.passed, failed: run.failed })}
      />
      <Definition
        layout="rows"
        rows={[
          { label: t('when'), value: t('whenBy', { when: format.dayTime(run.at), name: run.byName }) },
          { label: t('file'), value: run.fileName, hint: t('fileHint') },
          { label: t('fileHash'), value: hash(run.fileSha256) },
          { label: t('resultHash'), value: hash(run.resultSha256) },
          { label: t('version'), value: run.version },
          { label: t('key'), value: hash(run.kid) },
        ]}
      />
    </>
  );
}
