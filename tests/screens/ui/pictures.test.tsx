// What: the head, the limits, the trend and the contact: what they say and where things lie.
import { fireEvent, render, screen, within } from '@testing-library/react';
import { axe } from 'jest-axe';
import { LimitBar } from '@/components/features/prescription/pictures/LimitBar';
import { TrendChart } from '@/components/features/reporting/pictures/TrendChart';
import { ContactMark } from '@/components/features/session/pictures/ContactMark';
import { HeadMap } from '@/components/features/session/pictures/HeadMap';
import { placeFromAbove, placeFromFront, positionNames } from '@/components/features/session/pictures/positions';
import '@/components/runtime/i18n';

describe('10-10 positions', () => {
  test('there are 61 of them, each inside the head and none twice', () => {
    expect(new Set(positionNames).size).toBe(61);
    for (const name of positionNames) {
      const place = placeFromAbove(name);
      expect(Math.hypot(place?.x ?? 9, place?.y ?? 9)).toBeLessThan(0.81);
    }
  });

  test('odd numbers lie on the left, even ones as far on the right, z on the midline', () => {
    for (const name of positionNames) {
      const x = placeFromAbove(name)?.x ?? Number.NaN;
      const digits = /\d+$/.exec(name)?.[0];
      if (digits === undefined) expect(x).toBeCloseTo(0);
      else if (Number(digits) % 2 === 1) {
        expect(x).toBeLessThan(0);
        const twin = name.replace(digits, String(Number(digits) + 1));
        expect(placeFromAbove(twin)?.x).toBeCloseTo(-x);
      }
    }
  });

  test('Cz is in the middle, Fpz in front, Oz behind, T7 at the left ear', () => {
    expect(placeFromAbove('Cz')).toEqual({ x: 0, y: 0 });
    expect(placeFromAbove('Fpz')?.y).toBeCloseTo(0.8);
    expect(placeFromAbove('Oz')?.y).toBeCloseTo(-0.8);
    expect(placeFromAbove('T7')?.x).toBeCloseTo(-0.8);
    expect(placeFromAbove('T7')?.y).toBeCloseTo(0);
  });

  test('names do not depend on capitals, and what is no position is nowhere', () => {
    expect(placeFromAbove('FP2')).toEqual(placeFromAbove('Fp2'));
    expect(placeFromAbove('X9')).toBeUndefined();
  });

  test('from the front only what lies in front is seen', () => {
    expect(placeFromFront('Fp2')?.x).toBeGreaterThan(0);
    expect(placeFromFront('Oz')).toBeUndefined();
  });
});

test('the head is one picture with one sentence, and left stays left in a page from right to left', () => {
  render(
    <HeadMap
      placements={[{ position: 'F3', polarity: 'anode' }]}
      label="F3 on the left forehead"
      leftLabel="your left"
      rightLabel="your right"
    />,
  );
  const picture = screen.getByRole('img', { name: 'F3 on the left forehead' });
  expect(picture.closest('[dir="ltr"]')).not.toBeNull();
});

describe('a limit', () => {
  test('says value, site limit and ceiling with their units in one sentence', async () => {
    const { container } = render(
      <LimitBar
        label="Charge"
        value={1.85}
        unit="C"
        siteLimit={4}
        ceiling={7.2}
        layerText="Site limit 4.0 C"
        sourceText="ceiling 7.2 C, Bikson et al. 2016"
      />,
    );
    expect(screen.getByRole('img').getAttribute('aria-label')).toBe(
      'Charge: 1.85 C. The site’s limit is 4 C, the ceiling 7.2 C.',
    );
    expect(screen.getByText('Site limit 4.0 C · ceiling 7.2 C, Bikson et al. 2016')).toBeTruthy();
    expect(await axe(container)).toHaveNoViolations();
  });
});

describe('a trend', () => {
  const times = [
    { at: 10, label: '23 Feb' },
    { at: 20, label: '24 Feb' },
    { at: 30, label: '25 Feb' },
  ];
  const points = [
    { at: 10, value: 1 },
    { at: 20, value: null },
    { at: 30, value: 4 },
  ];

  test('does not join what was recorded across what was not', () => {
    const { container } = render(
      <TrendChart label="Headache" times={times} rows={[{ id: 'h', label: 'Headache', unit: '0–10', range: [0, 10], points }]} />,
    );
    const lines = [...container.querySelectorAll('path')].map((path) => path.getAttribute('d') ?? '');
    // Each recorded day is a stroke that begins by itself; a joined one would begin once. The dots are paths too.
    expect(lines.filter((line) => line.split('M').length === 3)).toHaveLength(1);
    expect(lines.some((line) => /L/.test(line) && !/A|a/.test(line) && line.split('M').length === 2)).toBe(false);
  });

  test('gives the same numbers as a table, and a gap as a gap', async () => {
    // jsdom has no width of its own; a narrow window would show a sheet a row.
    Object.defineProperty(document.documentElement, 'clientWidth', { configurable: true, value: 1440 });
    fireEvent(window, new Event('resize'));
    const { container } = render(
      <TrendChart
        label="Headache from 23 to 25 February"
        times={times}
        rows={[{ id: 'h', label: 'Headache', unit: '0–10', range: [0, 10], points }]}
      />,
    );
    expect(screen.getByRole('img', { name: 'Headache from 23 to 25 February' })).toBeTruthy();
    const table = screen.getByRole('table', { name: 'Headache from 23 to 25 February' });
    expect(
      within(table)
        .getAllByRole('row')
        .slice(1)
        .map((row) => row.textContent),
    ).toEqual(['23 Feb1', '24 Febnot recorded', '25 Feb4']);
    expect(await axe(container)).toHaveNoViolations();
  });
});

test.each([
  ['good', 'Good'],
  ['weak', 'Weak'],
  ['none', 'None'],
] as const)('contact %s is said in a word', (quality, word) => {
  render(<ContactMark quality={quality} />);
  expect(screen.getByText(word)).toBeTruthy();
});
