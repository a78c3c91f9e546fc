import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { afterEach, beforeAll, expect, it, vi } from 'vitest';
import { ConfirmDialog } from './Dialog';

// jsdom has the element but not its methods.
beforeAll(() => {
  HTMLDialogElement.prototype.showModal = function showModal() {
    this.open = true;
  };
  HTMLDialogElement.prototype.close = function close() {
    this.open = false;
    this.dispatchEvent(new Event('close'));
  };
});
afterEach(cleanup);

it('asks by name, does it or leaves it', async () => {
  const user = userEvent.setup();
  const done = vi.fn();
  const left = vi.fn();
  const dialog = (open: boolean) => (
    <ConfirmDialog isOpen={open} onClose={left} onConfirm={done} title="Withdraw Wrenfield Academy 2?" confirm="Withdraw the team">
      <p>Its places stay free for others.</p>
    </ConfirmDialog>
  );
  const { rerender } = render(dialog(false));
  expect(screen.queryByRole('dialog')).toBeNull();
  rerender(dialog(true));
  screen.getByRole('dialog', { name: 'Withdraw Wrenfield Academy 2?' });
  await user.click(screen.getByRole('button', { name: 'Withdraw the team' }));
  expect(done).toHaveBeenCalledTimes(1);
  await user.click(screen.getByRole('button', { name: 'Leave it as it is' }));
  expect(left).toHaveBeenCalledTimes(1);
  rerender(dialog(false));
  expect(left).toHaveBeenCalledTimes(1);
  expect(screen.queryByRole('dialog')).toBeNull();
});

it('Escape means not now', () => {
  const left = vi.fn();
  render(<ConfirmDialog isOpen onClose={left} onConfirm={() => undefined} title="Lock the plan?" confirm="Lock it" />);
  const event = new Event('cancel', { cancelable: true });
  screen.getByRole('dialog').dispatchEvent(event);
  expect(event.defaultPrevented).toBe(true);
  expect(left).toHaveBeenCalledTimes(1);
});
