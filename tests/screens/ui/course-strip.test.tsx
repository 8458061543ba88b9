// What: the course strip and the trapezoid as shapes and as texts, whatever their size.
import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { axe } from 'jest-axe';
import { CourseStrip, type CourseMark } from '@/components/features/course/pictures/CourseStrip';
import {
  markParts,
  stripMeasures,
  weeksOf,
  type MarkState,
} from '@/components/features/course/pictures/strip-geometry';
import { Trapezoid } from '@/components/features/session/pictures/Trapezoid';
import { trapezoidOf } from '@/components/features/session/pictures/trapezoid-geometry';
import '@/components/runtime/i18n';

const states: readonly MarkState[] = [
  'delivered',
  'partial',
  'planned',
  'next',
  'missed',
  'held',
  'running',
  'excused',
  'cancelled',
];
const sizes = ['row', 'card', 'page', 'mail'] as const;
const marks: CourseMark[] = states.map((state, index) => ({
  number: index + 1,
  state,
  fraction: 0.6,
  weekStart: index % 5 === 0,
  label: `Session ${index + 1}, ${state}`,
}));

describe('the course strip', () => {
  test.each(sizes)('at size %s gives every mark its text and itself one sentence', (size) => {
    render(<CourseStrip marks={marks} size={size} label="9 sessions in all." />);
    const strip = screen.getByRole('list', { name: '9 sessions in all.' });
    expect(
      within(strip)
        .getAllByRole('img')
        .map((mark) => mark.getAttribute('aria-label')),
    ).toEqual(marks.map((mark) => mark.label));
  });

  test('has no fault that axe finds, pressed or only looked at', async () => {
    const { container } = render(
      <>
        <CourseStrip marks={marks} size="row" label="9 sessions in all." />
        <CourseStrip marks={marks} size="page" label="9 sessions to press." onPressMark={() => undefined} />
      </>,
    );
    expect(await axe(container)).toHaveNoViolations();
  });

  test('leads from a pressed mark to its session', async () => {
    const pressed: number[] = [];
    render(
      <CourseStrip marks={marks} size="page" label="9 sessions" onPressMark={(mark) => pressed.push(mark.number)} />,
    );
    await userEvent.setup().click(screen.getByRole('button', { name: 'Session 3, planned' }));
    expect(pressed).toEqual([3]);
  });

  test('keeps weeks together', () => {
    expect(weeksOf(marks).map((week) => week.map((mark) => mark.number))).toEqual([
      [1, 2, 3, 4, 5],
      [6, 7, 8, 9],
    ]);
  });

  test('groups by five where no week is marked', () => {
    expect(weeksOf(marks.map(({ number }) => ({ number, weekStart: false }))).map((week) => week.length)).toEqual([
      5, 4,
    ]);
  });

  test.each(sizes)('tells every two states apart by shape alone at size %s', (size) => {
    // Without its colour, a mark is its parts: kinds and paths.
    const shapes = states
      .filter((state) => state !== 'running')
      .map((state) =>
        JSON.stringify(markParts({ state, fraction: 0.6 }, stripMeasures[size]).map((part) => ({ ...part, role: '' }))),
      );
    expect(new Set(shapes).size).toBe(shapes.length);
  });

  test('cuts a session stopped early at the right, where it was stopped', () => {
    const { width, height } = stripMeasures.page;
    const [fill] = markParts({ state: 'partial', fraction: 0.5 }, stripMeasures.page);
    expect(fill).toMatchObject({ kind: 'fill', role: 'steady' });
    expect(fill?.kind === 'fill' ? fill.d : '').toContain(`L${width / 2} 0 L${width / 2} ${height}`);
  });

  test('draws nothing filled for a session that delivered nothing', () => {
    for (const state of ['planned', 'next', 'missed', 'held', 'excused', 'cancelled'] as const) {
      expect(markParts({ state, fraction: 1 }, stripMeasures.card).filter((part) => part.kind === 'fill')).toEqual([]);
    }
  });
});

describe('the trapezoid', () => {
  const dose = { rampUpSeconds: 30, holdSeconds: 1200, rampDownSeconds: 30 };

  test('is one picture with one sentence', () => {
    render(
      <Trapezoid
        {...dose}
        intensityMilliamp={2}
        size="hero"
        filledSeconds={600}
        label="10 of 21 minutes, holding at 2.0 mA"
      />,
    );
    expect(screen.getAllByRole('img').map((picture) => picture.getAttribute('aria-label'))).toEqual([
      '10 of 21 minutes, holding at 2.0 mA',
    ]);
  });

  test('to scale, a second is as wide in the ramp as in the hold', () => {
    const shape = trapezoidOf(dose, { width: 1260, height: 10, leastRampShare: 0 });
    expect([0, 30, 630, 1230, 1260].map(shape.x)).toEqual([0, 30, 630, 1230, 1260]);
  });

  test('with widened ramps still ends where it ends and never runs back', () => {
    const shape = trapezoidOf(dose, { width: 320, height: 10, leastRampShare: 0.085 });
    const places = Array.from({ length: 127 }, (_, tens) => shape.x(tens * 10));
    expect(places.every((x, index) => index === 0 || x >= (places[index - 1] ?? 0))).toBe(true);
    expect(shape.x(1260)).toBeCloseTo(320);
    expect(shape.x(5000)).toBeCloseTo(320);
  });

  test('without ramps is a rectangle and not a fault', () => {
    const shape = trapezoidOf(
      { rampUpSeconds: 0, holdSeconds: 60, rampDownSeconds: 0 },
      { width: 60, height: 10, leastRampShare: 0 },
    );
    expect([shape.x(0), shape.x(30), shape.x(60)]).toEqual([0, 30, 60]);
    expect(shape.level(0)).toBe(1);
  });
});
