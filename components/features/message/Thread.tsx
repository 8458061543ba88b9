/**
 * A thread of messages, newest at the bottom, with a box to write. Used by both sides; it says when nobody reads at once.
 */
import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { View } from 'react-native';
import { useCall, usePages } from '@/components/runtime/api';
import { useFormat } from '@/components/runtime/format';
import { Button } from '@/components/ui/Button';
import { TextAreaField } from '@/components/ui/Field';
import { Notice } from '@/components/ui/Notice';
import { EmptyState, FailedState, LoadingState } from '@/components/ui/States';
import { Text } from '@/components/ui/Text';
import { radius, space, stroke, useTheme } from '@/components/ui/theme';
import { listMessages, sendMessage, type MessageView } from '@/shared/contracts/message';

const everyMs = 15_000;
const mostCharacters = 2000;

function Bubble({ message }: { message: MessageView }) {
  const { t } = useTranslation('messages');
  const { colour } = useTheme();
  const format = useFormat();
  return (
    <View role="listitem" style={{ alignItems: message.from.isMe ? 'flex-end' : 'flex-start' }}>
      <View
        style={{
          maxWidth: '88%',
          gap: space[1],
          padding: space[3],
          borderRadius: radius,
          borderWidth: stroke.hair,
          borderColor: message.from.isMe ? colour.actionTint : colour.line,
          backgroundColor: message.from.isMe ? colour.actionTint : colour.raised,
        }}
      >
        <Text size="small" tone="muted">
          {t('head', { name: message.from.isMe ? t('you') : message.from.name, at: format.dayTime(message.at) })}
        </Text>
        <Text>{message.text}</Text>
      </View>
    </View>
  );
}

export function Thread({ participantId }: { participantId?: string }) {
  const { t } = useTranslation('messages');
  const query = participantId ? { participantId } : {};
  const list = usePages(listMessages, { query, everyMs });
  const send = useCall(sendMessage);
  const [text, setText] = useState('');
  const messages = (list.data?.pages.flatMap((page) => page.items) ?? []).toReversed();
  const go = async () => {
    await send.mutateAsync({ body: { ...query, text }, key: crypto.randomUUID() });
    setText('');
  };
  return (
    <View style={{ gap: space[4] }}>
      {list.isPending ? <LoadingState /> : null}
      {list.isError ? <FailedState onRetry={() => void list.refetch()} /> : null}
      {list.hasNextPage ? <Button kind="quiet" flush label={t('older')} busy={list.isFetchingNextPage} onPress={() => void list.fetchNextPage()} /> : null}
      {list.data && messages.length === 0 ? <EmptyState title={t('empty')}>{t(participantId ? 'emptyHelpStaff' : 'emptyHelp')}</EmptyState> : null}
      <View role="list" aria-label={t('title')} style={{ gap: space[3] }}>
        {messages.map((message) => (
          <Bubble key={message.id} message={message} />
        ))}
      </View>
      {send.error ? <Notice tone="stop" title={send.error.offline ? t('offline') : send.error.problem.detail} announce="assertive" /> : null}
      <TextAreaField label={t('write')} value={text} onChange={setText} maxLength={mostCharacters} rows={3} />
      <Button label={t('send')} grow busy={send.isPending} disabled={text.trim() === ''} onPress={() => void go().catch(() => undefined)} />
    </View>
  );
}
