// What native builds would share with the page: a button that can be pressed and says what it is, and the course strip with its
// marks, drawn by the phone's own components. Must not repeat what the screen tests prove in the browser.
import { fireEvent, render, screen } from '@testing-library/react-native';
import { CourseStrip } from '@/components/features/course/pictures/CourseStrip';
import { i18n } from '@/components/runtime/i18n';
import { Button } from '@/components/ui/Button';

beforeAll(() => i18n.changeLanguage('en'));

test('a button of the phone calls back once when it is pressed, and not at all while it is busy', () => {
  const pressed = jest.fn();
  const { rerender } = render(<Button label="Stop" kind="stop" onPress={pressed} />);
  fireEvent.press(screen.getByRole('button', { name: 'Stop' }));
  expect(pressed).toHaveBeenCalledTimes(1);

  rerender(<Button label="Stop" kind="stop" busy busyLabel="Stopping" onPress={pressed} />);
  fireEvent.press(screen.getByText('Stopping'));
  expect(pressed).toHaveBeenCalledTimes(1);
});

test('the course strip tells each of its marks in words and answers with the one that was pressed', () => {
  const pressed = jest.fn();
  const marks = [
    { number: 1, state: 'delivered' as const, label: 'Session 1, Monday 2 March, delivered' },
    { number: 2, state: 'missed' as const, label: 'Session 2, Tuesday 3 March, missed' },
  ];
  render(<CourseStrip marks={marks} size="page" label="2 of 2 sessions behind." onPressMark={pressed} />);
  fireEvent.press(screen.getByLabelText('Session 2, Tuesday 3 March, missed'));
  expect(pressed).toHaveBeenCalledWith(marks[1]);
});
