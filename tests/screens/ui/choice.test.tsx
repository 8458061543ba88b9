// What: answers as radio cards, chips and the 0–10 scale, as people and screen readers meet them.
import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { axe } from 'jest-axe';
import { useState } from 'react';
import '@/components/runtime/i18n';
import { Chips, Choice } from '@/components/ui/Choice';
import { ScaleInput } from '@/components/ui/ScaleInput';

const skin = [
  { value: 'usual', label: 'As always' },
  { value: 'pink', label: 'Pink' },
  { value: 'broken', label: 'Broken' },
];

function SkinQuestion({ onAnswer }: { onAnswer?: (value: string) => void }) {
  const [value, setValue] = useState<string | null>(null);
  const answer = (next: string) => {
    setValue(next);
    onAnswer?.(next);
  };
  return (
    <Choice
      label="How is the skin?"
      options={skin}
      value={value}
      onChange={answer}
      error={value === 'broken' ? 'Not today.' : undefined}
    />
  );
}

describe('Choice', () => {
  test('nothing is chosen before a person chooses, and one answer lifts the other', async () => {
    const user = userEvent.setup();
    render(<SkinQuestion />);
    expect(screen.queryAllByRole('radio', { checked: true })).toHaveLength(0);
    await user.click(screen.getByRole('radio', { name: 'Pink' }));
    await user.click(screen.getByRole('radio', { name: 'As always' }));
    expect(screen.getAllByRole('radio', { checked: true }).map((radio) => radio.textContent)).toEqual(['As always']);
  });

  test('is one stop of the tab key, and the arrows move within it and choose', async () => {
    const user = userEvent.setup();
    const answers: string[] = [];
    render(<SkinQuestion onAnswer={(value) => answers.push(value)} />);
    await user.tab();
    expect(document.activeElement).toBe(screen.getByRole('radio', { name: 'As always' }));
    await user.keyboard('{ArrowDown}{ArrowDown}{ArrowDown}');
    expect(answers).toEqual(['pink', 'broken', 'usual']);
    expect(document.activeElement).toBe(screen.getByRole('radio', { name: 'As always' }));
    await user.tab();
    expect(document.activeElement).toBe(document.body);
  });

  test('names the group by its question and ties the error to it', async () => {
    const user = userEvent.setup();
    const { container } = render(<SkinQuestion />);
    await user.click(screen.getByRole('radio', { name: 'Broken' }));
    expect(screen.getByRole('radiogroup', { name: 'How is the skin?', description: 'Not today.' })).toBeTruthy();
    expect(await axe(container)).toHaveNoViolations();
  });
});

describe('Chips', () => {
  function Felt() {
    const [values, setValues] = useState<string[]>([]);
    return (
      <Chips
        label="Felt"
        values={values}
        onChange={setValues}
        exclusive={['nothing']}
        options={[
          { value: 'itch', label: 'Itching' },
          { value: 'tired', label: 'Tired' },
          { value: 'nothing', label: 'Nothing' },
        ]}
      />
    );
  }
  const checked = () => screen.queryAllByRole('checkbox', { checked: true }).map((chip) => chip.textContent);

  test('several can be chosen, and "nothing" never stands beside something', async () => {
    const user = userEvent.setup();
    render(<Felt />);
    await user.click(screen.getByRole('checkbox', { name: 'Itching' }));
    await user.click(screen.getByRole('checkbox', { name: 'Tired' }));
    expect(checked()).toEqual(['Itching', 'Tired']);
    await user.click(screen.getByRole('checkbox', { name: 'Nothing' }));
    expect(checked()).toEqual(['Nothing']);
    await user.click(screen.getByRole('checkbox', { name: 'Tired' }));
    expect(checked()).toEqual(['Tired']);
  });
});

describe('ScaleInput', () => {
  function Strength({ start = null }: { start?: number | null }) {
    const [value, setValue] = useState<number | null>(start);
    return <ScaleInput label="Headache" value={value} onChange={setValue} lowLabel="none" highLabel="worst ever" />;
  }

  test('shows eleven steps and no answer until one is given', () => {
    render(<Strength />);
    expect(screen.getAllByRole('radio')).toHaveLength(11);
    expect(screen.queryByRole('radio', { checked: true })).toBeNull();
  });

  test('says what its ends mean to those who cannot see them', () => {
    render(<Strength />);
    expect(screen.getByRole('radio', { name: '0: none' })).toBeTruthy();
    expect(screen.getByRole('radio', { name: '10: worst ever' })).toBeTruthy();
  });

  test('stops at its ends and jumps to them by Home and End', async () => {
    const user = userEvent.setup();
    render(<Strength start={9} />);
    await user.tab();
    await user.keyboard('{ArrowRight}{ArrowRight}');
    expect(screen.getByRole('radio', { checked: true }).getAttribute('aria-label')).toBe('10: worst ever');
    await user.keyboard('{Home}{ArrowLeft}');
    expect(screen.getByRole('radio', { checked: true }).getAttribute('aria-label')).toBe('0: none');
    await user.keyboard('{End}');
    expect(screen.getByRole('radio', { checked: true }).getAttribute('aria-label')).toBe('10: worst ever');
  });
});
