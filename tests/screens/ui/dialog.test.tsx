// What: a dialog keeps the focus, lets it go, and gives it back.
import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import '@/components/runtime/i18n';
import { Button } from '@/components/ui/Button';
import { Dialog } from '@/components/ui/Dialog';
import { TextField } from '@/components/ui/Field';

function Signing({ withField, busy }: { withField?: boolean; busy?: boolean }) {
  const [isOpen, setOpen] = useState(false);
  return (
    <>
      <Button label="Sign" onPress={() => setOpen(true)} />
      <Dialog
        open={isOpen}
        title="Your signature"
        busy={busy}
        onClose={() => setOpen(false)}
        actions={<Button label="I prescribe this" />}
      >
        {withField ? <TextField label="Password" value="" onChange={() => undefined} /> : 'It means: I prescribe this.'}
      </Dialog>
    </>
  );
}

async function opened(element: React.ReactElement) {
  const user = userEvent.setup();
  render(element);
  await user.click(screen.getByRole('button', { name: 'Sign' }));
  return user;
}

test('is named by its title and begins at its first field', async () => {
  await opened(<Signing withField />);
  expect(screen.getByRole('dialog', { name: 'Your signature' })).toBeTruthy();
  expect(document.activeElement).toBe(screen.getByLabelText('Password'));
});

test('begins at its title where there is no field, so that it is read', async () => {
  await opened(<Signing />);
  expect(document.activeElement?.textContent).toBe('Your signature');
});

test('does not let the tab key out', async () => {
  const user = await opened(<Signing withField />);
  const dialog = screen.getByRole('dialog');
  const places: boolean[] = [];
  // Five stops in the dialog, and the two brackets round it that send the focus back in.
  for (let press = 0; press < 7; press += 1) {
    await user.tab();
    const isBracket = document.activeElement?.matches('[role="none"][tabindex="0"]') ?? false;
    places.push(isBracket || dialog.contains(document.activeElement));
  }
  expect(places).toEqual(places.map(() => true));
});

test('closes by Escape and gives the focus back', async () => {
  const user = await opened(<Signing withField />);
  await user.keyboard('{Escape}');
  expect(screen.queryByRole('dialog')).toBeNull();
  expect(document.activeElement).toBe(screen.getByRole('button', { name: 'Sign' }));
});

test('stays while something is on its way', async () => {
  const user = await opened(<Signing withField busy />);
  await user.keyboard('{Escape}');
  expect(screen.getByRole('dialog')).toBeTruthy();
});
