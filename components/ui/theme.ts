/**
 * The one place for colours, spacing, type sizes and motion, named by role and not by hue, and the small context that
 * says which of them holds now. It must not know any screen, and no other file may hold a colour or a length of its own.
 */
import {
  createContext,
  createElement,
  use,
  useEffect,
  useMemo,
  useState,
  useSyncExternalStore,
  type ReactNode,
} from 'react';
import { useColorScheme } from 'react-native';

export interface Colours {
  /** ground, cards, wells */
  surface: string;
  raised: string;
  sunken: string;
  /** text, second text, hairlines */
  ink: string;
  muted: string;
  line: string;
  /** what can be done next */
  action: string;
  actionStrong: string;
  actionTint: string;
  onAction: string;
  /** delivered, good contact */
  steady: string;
  steadyTint: string;
  /** look, then go on */
  caution: string;
  cautionTint: string;
  cautionFill: string;
  /** hold, safety, Stop */
  stop: string;
  stopStrong: string;
  stopTint: string;
  onStop: string;
  /** what lies behind a dialog, and the one shadow */
  veil: string;
  shadow: string;
}

export const light: Colours = {
  surface: '#F5F1E8',
  raised: '#FFFDF8',
  sunken: '#ECE6D9',
  ink: '#1B2422',
  muted: '#59645F',
  line: '#D8D0C0',
  action: '#0D5759',
  actionStrong: '#083F41',
  actionTint: '#DDEAE8',
  onAction: '#FFFDF8',
  steady: '#47683A',
  steadyTint: '#E1EAD8',
  caution: '#8A5200',
  cautionTint: '#FAEBCB',
  cautionFill: '#E9B559',
  stop: '#9E2F1B',
  stopStrong: '#7C2112',
  stopTint: '#F7DED6',
  onStop: '#FFFDF8',
  veil: 'rgba(27, 36, 34, 0.45)',
  shadow: 'rgba(27, 36, 34, 0.16)',
};

export const dark: Colours = {
  surface: '#141918',
  raised: '#1C2321',
  sunken: '#0F1312',
  ink: '#EDE8DD',
  muted: '#A5AFA9',
  line: '#35403B',
  action: '#74C4BF',
  actionStrong: '#97D8D3',
  actionTint: '#1C3534',
  onAction: '#0F1312',
  steady: '#9DC481',
  steadyTint: '#24321E',
  caution: '#F0BC62',
  cautionTint: '#3A2D14',
  cautionFill: '#C98F2E',
  stop: '#F29079',
  stopStrong: '#F7AE9C',
  stopTint: '#3E211B',
  onStop: '#0F1312',
  veil: 'rgba(0, 0, 0, 0.6)',
  shadow: 'rgba(0, 0, 0, 0.5)',
};

/** Printed pages are light whatever the screen was, on a ground that takes no ink. */
export const printed: Colours = { ...light, surface: '#FFFFFF', raised: '#FFFFFF' };

/** Four-point scale; the name is the number of steps of 4 px. */
export const space = {
  0: 0,
  half: 2,
  1: 4,
  2: 8,
  3: 12,
  4: 16,
  5: 20,
  6: 24,
  7: 28,
  8: 32,
  10: 40,
  12: 48,
  14: 56,
  16: 64,
  20: 80,
  24: 96,
} as const;

export const radius = 6;
export const pill = 999;
/** Widths of lines: hairline between things, firm around what can be touched, bold for the mark of a selected place. */
export const stroke = { hair: 1, firm: 2, bold: 4, edge: 6 } as const;
/** Smallest height of what is touched, in px: the participant's screens, and the panel worked with a pointer. */
export const touch = { reading: 48, panel: 40, scale: 44 } as const;
/** Below this width of the window a wide screen takes the shape of a phone, px. */
export const phoneBelow = 768;
/** Width of the reading column and of the panel's rail, in rem. */
export const readingColumnRem = 34;
export const railRem = 13;

export const fontFamily = '"Atkinson Hyperlegible", "Segoe UI", system-ui, -apple-system, sans-serif';

export type TextSize = 'fine' | 'small' | 'body' | 'lead' | 'title' | 'display' | 'huge';
export type Density = 'reading' | 'panel';
export type Mode = 'system' | 'light' | 'dark';
export type Tone = 'ink' | 'muted' | 'action' | 'steady' | 'caution' | 'stop' | 'onAction' | 'onStop';
export type StateTone = 'muted' | 'action' | 'steady' | 'caution' | 'stop';

interface TypeStep {
  fontSize: number;
  lineHeight: number;
}

const step14 = { fontSize: 14, lineHeight: 20 } as const;
const step16 = { fontSize: 16, lineHeight: 24 } as const;
const step18 = { fontSize: 18, lineHeight: 28 } as const;
const step22 = { fontSize: 22, lineHeight: 28 } as const;
const step28 = { fontSize: 28, lineHeight: 36 } as const;
const step40 = { fontSize: 40, lineHeight: 48 } as const;

/** Body is 18 where a participant reads (one hand, an arm's length) and 16 on the panel. */
export const typeSteps: Record<Density, Record<TextSize, TypeStep>> = {
  reading: { fine: step14, small: step16, body: step18, lead: step18, title: step22, display: step28, huge: step40 },
  panel: { fine: step14, small: step14, body: step16, lead: step18, title: step22, display: step28, huge: step40 },
};

export function tintOf(colour: Colours, tone: StateTone): string {
  if (tone === 'action') return colour.actionTint;
  if (tone === 'steady') return colour.steadyTint;
  if (tone === 'caution') return colour.cautionTint;
  return tone === 'stop' ? colour.stopTint : colour.sunken;
}

export interface Theme {
  colour: Colours;
  isDark: boolean;
  mode: Mode;
  setMode(mode: Mode): void;
  /** The person's own setting, 1 = as drawn. */
  textScale: number;
  setTextScale(scale: number): void;
  density: Density;
  /** Font size and line height of a named size, with the person's and the browser's enlargement in it. */
  type(size: TextSize): TypeStep;
  /** A length that grows with the text, in px. */
  rem(count: number): number;
  touch: number;
}

interface Settings {
  mode: Mode;
  setMode(mode: Mode): void;
  textScale: number;
  setTextScale(scale: number): void;
  rootScale: number;
  isPrinting: boolean;
}

const SettingsContext = createContext<Settings>({
  mode: 'system',
  setMode: () => undefined,
  textScale: 1,
  setTextScale: () => undefined,
  rootScale: 1,
  isPrinting: false,
});
const DensityContext = createContext<Density>('panel');

/** Browsers let people set their own base size; 16 px is what "medium" means where nobody did. */
function browserTextScale(): number {
  if (typeof document === 'undefined') return 1;
  const size = Number.parseFloat(getComputedStyle(document.documentElement).fontSize);
  return Number.isFinite(size) && size > 0 ? size / 16 : 1;
}

const printQuery = () => (typeof matchMedia === 'undefined' ? undefined : matchMedia('print'));

function subscribeToPrint(onChange: () => void): () => void {
  const query = printQuery();
  query?.addEventListener('change', onChange);
  return () => query?.removeEventListener('change', onChange);
}

/** A store read at once, so that the page has changed before the browser lays it out on paper. */
function useIsPrinting(): boolean {
  return useSyncExternalStore(
    subscribeToPrint,
    () => printQuery()?.matches ?? false,
    () => false,
  );
}

export interface ThemeProviderProps {
  initialMode?: Mode;
  initialTextScale?: number;
  /** Told after each change, so that whoever stores settings can keep it. */
  onChange?(settings: { mode: Mode; textScale: number }): void;
  children: ReactNode;
}

export function ThemeProvider({
  initialMode = 'system',
  initialTextScale = 1,
  onChange,
  children,
}: ThemeProviderProps) {
  const [mode, keepMode] = useState<Mode>(initialMode);
  const [textScale, keepTextScale] = useState(initialTextScale);
  const [rootScale] = useState(browserTextScale);
  const isPrinting = useIsPrinting();

  useEffect(() => {
    // The page's ground, scroll bars and focus ring come from the style sheet and follow this mark.
    if (typeof document !== 'undefined') document.documentElement.dataset.theme = mode;
  }, [mode]);

  const settings = useMemo<Settings>(
    () => ({
      mode,
      setMode: (next) => {
        keepMode(next);
        onChange?.({ mode: next, textScale });
      },
      textScale,
      setTextScale: (next) => {
        keepTextScale(next);
        onChange?.({ mode, textScale: next });
      },
      rootScale,
      isPrinting,
    }),
    [mode, textScale, rootScale, isPrinting, onChange],
  );
  return createElement(SettingsContext, { value: settings }, children);
}

/** Shells say once how close things may stand: `reading` for participant and caregiver, `panel` for staff. */
export function DensityProvider({ density, children }: { density: Density; children: ReactNode }) {
  return createElement(DensityContext, { value: density }, children);
}

export function useTheme(): Theme {
  const { mode, setMode, textScale, setTextScale, rootScale, isPrinting } = use(SettingsContext);
  const density = use(DensityContext);
  const system = useColorScheme();
  const isDark = !isPrinting && (mode === 'dark' || (mode === 'system' && system === 'dark'));
  return useMemo(() => {
    const scale = textScale * rootScale;
    return {
      colour: isPrinting ? printed : isDark ? dark : light,
      isDark,
      mode,
      setMode,
      textScale,
      setTextScale,
      density,
      type: (size) => {
        const drawn = typeSteps[density][size];
        return { fontSize: drawn.fontSize * scale, lineHeight: drawn.lineHeight * scale };
      },
      rem: (count) => count * 16 * scale,
      touch: touch[density],
    };
  }, [isDark, isPrinting, mode, setMode, textScale, setTextScale, rootScale, density]);
}
