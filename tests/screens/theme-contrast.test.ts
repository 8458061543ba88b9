// What: every pair of colours that stands on another, in both themes, by WCAG 2.2 (text 4.5:1, marks and edges 3:1); and
// the style sheet of the page repeats the theme's colours. Must not: list a pair that no component uses.
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { dark, light, type Colours } from '@/components/ui/theme';

/** Relative luminance, WCAG 2.2 glossary. */
function luminance(hex: string): number {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5]
    .map((at) => Number.parseInt(hex.slice(at, at + 2), 16) / 255)
    .map((share) => (share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4));
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

function contrast(one: string, other: string): number {
  const [high = 0, low = 0] = [luminance(one), luminance(other)].sort((a, b) => b - a);
  return (high + 0.05) / (low + 0.05);
}

type Role = keyof Colours;

const text: readonly [Role, Role][] = [
  ...(['ink', 'muted', 'action', 'steady', 'caution', 'stop'] as const).flatMap((word): [Role, Role][] => [
    [word, 'surface'],
    [word, 'raised'],
  ]),
  ['ink', 'sunken'],
  ['muted', 'sunken'],
  ['ink', 'actionTint'],
  ['muted', 'actionTint'],
  ['action', 'actionTint'],
  ['ink', 'steadyTint'],
  ['steady', 'steadyTint'],
  ['ink', 'cautionTint'],
  ['caution', 'cautionTint'],
  ['ink', 'stopTint'],
  ['stop', 'stopTint'],
  ['onAction', 'action'],
  ['onAction', 'actionStrong'],
  ['onStop', 'stop'],
  ['onStop', 'stopStrong'],
];

const marks: readonly [Role, Role][] = [
  ...(['steady', 'muted', 'action', 'stop'] as const).flatMap((mark): [Role, Role][] => [
    [mark, 'surface'],
    [mark, 'raised'],
    [mark, 'actionTint'],
    [mark, 'sunken'],
  ]),
  ['action', 'sunken'],
  ['caution', 'sunken'],
  ['stop', 'sunken'],
  ['ink', 'sunken'],
  ['raised', 'action'],
  ['raised', 'caution'],
  ['raised', 'stop'],
  ['raised', 'steady'],
];

describe.each([
  ['light', light],
  ['dark', dark],
])('in the %s theme', (_name, theme) => {
  test.each(text)('%s can be read on %s', (word, ground) => {
    expect(contrast(theme[word], theme[ground])).toBeGreaterThanOrEqual(4.5);
  });

  test.each(marks)('a mark in %s is seen on %s', (mark, ground) => {
    expect(contrast(theme[mark], theme[ground])).toBeGreaterThanOrEqual(3);
  });
});

describe('the page before the program', () => {
  const sheet = readFileSync(path.resolve(__dirname, '../../public/rampwell.css'), 'utf8');
  const blocks = [...sheet.matchAll(/:root[^{]*\{([^}]*--surface[^}]*)\}/g)].map(([, body = '']) =>
    Object.fromEntries([...body.matchAll(/--([a-z-]+):\s*(#[0-9a-f]{6})/g)].map(([, name, value]) => [name, value])),
  );
  const variables = (theme: Colours) => ({
    surface: theme.surface.toLowerCase(),
    raised: theme.raised.toLowerCase(),
    ink: theme.ink.toLowerCase(),
    muted: theme.muted.toLowerCase(),
    action: theme.action.toLowerCase(),
    'on-action': theme.onAction.toLowerCase(),
  });

  test('has the colours of the theme, light, dark by the system, dark by choice', () => {
    expect(blocks).toEqual([variables(light), variables(dark), variables(dark)]);
  });
});
