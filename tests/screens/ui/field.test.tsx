// What: labels, hints and errors of fields as assistive technology is told of them, numbers as people write them, and
// what a server found wrong shown where it belongs.
import { act, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { axe } from 'jest-axe';
import { useState } from 'react';
import { z } from 'zod';
import { Form } from '@/components/forms/Form';
import { FormNumberField, FormTextField } from '@/components/forms/fields';
import { useContractForm, type ServerField } from '@/components/forms/use-contract-form';
import '@/components/runtime/i18n';
import { DateField, NumberField, PasswordField, SelectField, TextField } from '@/components/ui/Field';

const ignore = () => undefined;

describe('a field', () => {
  test.each([
    ['text', <TextField key="f" label="Phone" hint="With the area" error="Too short." value="" onChange={ignore} />],
    [
      'number',
      <NumberField key="f" label="Phone" hint="With the area" error="Too short." value={null} onChange={ignore} />,
    ],
    ['day', <DateField key="f" label="Phone" hint="With the area" error="Too short." value="" onChange={ignore} />],
    [
      'list',
      <SelectField
        key="f"
        label="Phone"
        hint="With the area"
        error="Too short."
        value=""
        options={[]}
        onChange={ignore}
      />,
    ],
  ])('of %s is named by its label, and its hint and error are read with it', async (_kind, field) => {
    const { container } = render(field);
    const control = screen.getByLabelText('Phone');
    const described = (control.getAttribute('aria-describedby') ?? '')
      .split(' ')
      .map((id) => document.getElementById(id)?.textContent);
    expect(described).toEqual(['With the area', 'Too short.']);
    expect(control.getAttribute('aria-invalid')).toBe('true');
    expect(await axe(container)).toHaveNoViolations();
  });

  test('takes the focus when its label is pressed', async () => {
    render(<TextField label="Phone" value="" onChange={ignore} />);
    await userEvent.setup().click(screen.getByText('Phone'));
    expect(document.activeElement).toBe(screen.getByLabelText('Phone'));
  });

  test('of a password shows it only while asked to', async () => {
    render(<PasswordField label="Password" value="lantern" onChange={ignore} />);
    const field = screen.getByLabelText('Password');
    expect(field.getAttribute('type')).toBe('password');
    await userEvent.setup().click(screen.getByRole('button', { name: 'Show' }));
    expect(screen.getByLabelText('Password').getAttribute('type')).not.toBe('password');
  });
});

describe('a number field', () => {
  function Intensity({ seen }: { seen: (number | null)[] }) {
    const [value, setValue] = useState<number | null>(null);
    const keep = (next: number | null) => {
      seen.push(next);
      setValue(next);
    };
    return <NumberField label="Intensity" unit="mA" value={value} onChange={keep} />;
  }

  test('reads a decimal comma as a point', async () => {
    const seen: (number | null)[] = [];
    render(<Intensity seen={seen} />);
    await userEvent.setup().type(screen.getByLabelText('Intensity'), '1,5');
    expect(seen.at(-1)).toBe(1.5);
  });

  test('gives nothing, and says so, for what is no number', async () => {
    const seen: (number | null)[] = [];
    render(<Intensity seen={seen} />);
    const user = userEvent.setup();
    await user.type(screen.getByLabelText('Intensity'), '1.5 or 2');
    await user.tab();
    expect(seen.at(-1)).toBeNull();
    expect(screen.getByRole('alert').textContent).toBe('Write a number, with digits only.');
  });

  test('shows its unit', () => {
    render(<Intensity seen={[]} />);
    expect(screen.getByText('mA')).toBeTruthy();
  });
});

const Draft = z.strictObject({ reason: z.string().min(10), intensityMicroamp: z.number().int().max(4000) });

describe('a form of a contract', () => {
  function DraftForm({ answer, left, sent }: { answer?: ServerField[]; left: ServerField[]; sent: unknown[] }) {
    const form = useContractForm(Draft, { reason: '', intensityMicroamp: 2000 });
    const send = form.handleSubmit((draft) => {
      sent.push(draft);
      left.push(...form.showServerFields(answer));
    });
    return (
      <Form onSubmit={() => void send()}>
        <FormTextField label="Reason" name="reason" control={form.control} />
        <FormNumberField label="Intensity" unit="mA" scale={1000} name="intensityMicroamp" control={form.control} />
      </Form>
    );
  }

  test('says in plain words what the schema allows, and goes to the first wrong field', async () => {
    const sent: unknown[] = [];
    render(<DraftForm left={[]} sent={sent} />);
    const user = userEvent.setup();
    await user.type(screen.getByLabelText('Reason'), 'short');
    await user.clear(screen.getByLabelText('Intensity'));
    await user.type(screen.getByLabelText('Intensity'), '5{Enter}');
    expect((await screen.findAllByRole('alert')).map((error) => error.textContent)).toEqual([
      'Write at least 10 characters.',
      'Write 4000 or less.',
    ]);
    expect(document.activeElement).toBe(screen.getByLabelText('Reason'));
    expect(sent).toEqual([]);
  });

  test('hands over whole units for what was written in the shown one', async () => {
    const sent: unknown[] = [];
    render(<DraftForm left={[]} sent={sent} />);
    const user = userEvent.setup();
    await user.type(screen.getByLabelText('Reason'), 'Skin to settle first');
    await user.clear(screen.getByLabelText('Intensity'));
    await user.type(screen.getByLabelText('Intensity'), '2.01{Enter}');
    await act(async () => undefined);
    expect(sent).toEqual([{ reason: 'Skin to settle first', intensityMicroamp: 2010 }]);
  });

  test("puts the server's findings on their fields, goes to the first, and loses none", async () => {
    const left: ServerField[] = [];
    const answer = [
      { path: '/intensityMicroamp', code: 'limit.site', message: 'The site allows 1.5 mA.' },
      { path: 'episode', code: 'unknown', message: 'Not asked for.' },
    ];
    render(<DraftForm answer={answer} left={left} sent={[]} />);
    await userEvent.setup().type(screen.getByLabelText('Reason'), 'Skin to settle first{Enter}');
    expect((await screen.findByRole('alert')).textContent).toBe('The site allows 1.5 mA.');
    expect(document.activeElement).toBe(screen.getByLabelText('Intensity'));
    expect(left.map((field) => field.path)).toEqual(['episode']);
  });
});
