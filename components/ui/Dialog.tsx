/**
 * A question that must be answered before going on. Keeps the focus inside, closes by Escape, gives the focus back. It
 * must never stand between a person and Stop.
 */
import { useEffect, useId, useRef, type ReactNode } from 'react';
import { Modal, Pressable, ScrollView, View } from 'react-native';
import { useTranslation } from 'react-i18next';
import { Icon } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { radius, space, stroke, useTheme } from '@/components/ui/theme';

export interface DialogProps {
  open: boolean;
  title: string;
  onClose(): void;
  children?: ReactNode;
  /** Buttons at the bottom; the one that goes on stands last. */
  actions?: ReactNode;
  size?: 'regular' | 'wide';
  /** The way out by Escape and by the cross is closed while something is on its way. */
  busy?: boolean;
}

/** Takes the focus to the first field, or to the title where there is none; gives it back to where it was at the end. */
function DialogBody({ title, titleId, onClose, children, actions, busy }: DialogProps & { titleId: string }) {
  const { t } = useTranslation('common');
  const { touch } = useTheme();
  const body = useRef<View>(null);
  useEffect(() => {
    const node: unknown = body.current;
    if (typeof HTMLElement === 'undefined' || !(node instanceof HTMLElement)) return;
    const before = document.activeElement;
    const target = node.querySelector<HTMLElement>('input, select, textarea, [role="radio"][tabindex="0"]');
    (target ?? node.querySelector<HTMLElement>('[role="heading"], h2'))?.focus();
    return () => {
      if (before instanceof HTMLElement && before.isConnected) before.focus();
    };
  }, []);
  return (
    <View ref={body} style={{ flexShrink: 1, minHeight: 0 }}>
      <View
        style={{
          flexDirection: 'row',
          alignItems: 'flex-start',
          gap: space[4],
          padding: space[6],
          paddingBottom: space[3],
        }}
      >
        <View style={{ flex: 1, minWidth: 0 }}>
          <Text id={titleId} heading={2} tabIndex={-1}>
            {title}
          </Text>
        </View>
        <Pressable
          role="button"
          aria-label={t('action.close')}
          disabled={busy}
          onPress={onClose}
          style={{
            width: touch,
            height: touch,
            alignItems: 'center',
            justifyContent: 'center',
            borderRadius: radius,
            marginTop: -space[2],
          }}
        >
          <Icon name="close" tone="muted" />
        </Pressable>
      </View>
      <ScrollView
        style={{ flexShrink: 1, minHeight: 0 }}
        contentContainerStyle={{ paddingHorizontal: space[6], paddingBottom: space[4], gap: space[4] }}
      >
        {typeof children === 'string' ? <Text>{children}</Text> : children}
      </ScrollView>
      {actions ? (
        <View
          style={{
            flexDirection: 'row',
            flexWrap: 'wrap',
            justifyContent: 'flex-end',
            gap: space[3],
            padding: space[6],
            paddingTop: space[3],
          }}
        >
          {actions}
        </View>
      ) : null}
    </View>
  );
}

export function Dialog(props: DialogProps) {
  const { open, onClose, size = 'regular', busy } = props;
  const { colour, rem } = useTheme();
  const titleId = useId();
  return (
    <Modal
      visible={open}
      transparent
      animationType="none"
      onRequestClose={busy ? undefined : onClose}
      aria-labelledby={titleId}
    >
      <View
        style={{
          flex: 1,
          padding: space[4],
          alignItems: 'center',
          justifyContent: 'center',
          backgroundColor: colour.veil,
        }}
      >
        <View
          style={{
            width: '100%',
            maxWidth: rem(size === 'wide' ? 48 : 32),
            maxHeight: '100%',
            borderRadius: radius,
            borderWidth: stroke.hair,
            borderColor: colour.line,
            backgroundColor: colour.raised,
            boxShadow: `0 8px 32px ${colour.shadow}`,
          }}
        >
          <DialogBody {...props} titleId={titleId} />
        </View>
      </View>
    </Modal>
  );
}
