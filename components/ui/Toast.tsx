/**
 * A short word that something was done, at the bottom for some seconds, with a way back where there is one. It must not
 * carry anything that has to be read: that is a notice on the page.
 */
import { createContext, use, useCallback, useEffect, useMemo, useState, type ReactNode } from 'react';
import { View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Icon } from '@/components/ui/Icon';
import { Text } from '@/components/ui/Text';
import { radius, space, stroke, useTheme } from '@/components/ui/theme';

export interface ToastMessage {
  text: string;
  tone?: 'steady' | 'caution' | 'stop';
  actionLabel?: string;
  onAction?(): void;
}

export interface ToastApi {
  show(message: ToastMessage): void;
}

// Own choice: long enough to read twice; longer where there is something to undo.
const shownMs = 6000;
const shownWithActionMs = 12000;

const ToastContext = createContext<ToastApi>({ show: () => undefined });

export function useToast(): ToastApi {
  return use(ToastContext);
}

export function ToastProvider({ children }: { children: ReactNode }) {
  const [message, setMessage] = useState<ToastMessage | null>(null);
  const show = useCallback((next: ToastMessage) => setMessage(next), []);
  const api = useMemo(() => ({ show }), [show]);
  useEffect(() => {
    if (!message) return;
    const timer = setTimeout(() => setMessage(null), message.onAction ? shownWithActionMs : shownMs);
    return () => clearTimeout(timer);
  }, [message]);
  return (
    <ToastContext value={api}>
      {children}
      <ToastRegion message={message} onDone={() => setMessage(null)} />
    </ToastContext>
  );
}

function ToastRegion({ message, onDone }: { message: ToastMessage | null; onDone(): void }) {
  const { colour, rem } = useTheme();
  const tone = message?.tone ?? 'steady';
  return (
    <View
      role="status"
      aria-live="polite"
      style={{
        position: 'fixed',
        bottom: space[6],
        start: space[0],
        end: space[0],
        zIndex: 10,
        alignItems: 'center',
        paddingHorizontal: space[4],
        pointerEvents: 'box-none',
      }}
    >
      {message ? (
        <View
          style={{
            flexDirection: 'row',
            alignItems: 'center',
            gap: space[3],
            maxWidth: rem(34),
            paddingVertical: space[2],
            paddingHorizontal: space[4],
            borderRadius: radius,
            borderWidth: stroke.hair,
            borderColor: colour[tone],
            backgroundColor: colour.raised,
            boxShadow: `0 8px 32px ${colour.shadow}`,
          }}
        >
          <Icon name={tone} tone={tone} />
          <View style={{ flexShrink: 1, paddingVertical: space[1] }}>
            <Text>{message.text}</Text>
          </View>
          {message.onAction && message.actionLabel ? (
            <Button
              kind="quiet"
              size="small"
              label={message.actionLabel}
              onPress={() => {
                message.onAction?.();
                onDone();
              }}
            />
          ) : null}
        </View>
      ) : null}
    </View>
  );
}
