import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { renderToString } from 'react-dom/server';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { Button } from './Button';
import { CheckField } from './CheckField';
import { ChoiceGroup } from './ChoiceGroup';
import { DecimalField } from './DecimalField';
import { ErrorSummary } from './ErrorSummary';
import { FileDrop } from './FileDrop';
import { Progress } from './Progress';
import { SelectField } from './SelectField';
import { keptAt, Status } from './Status';
import { TextField } from './TextField';

// jsdom has no CSS object; the simulated keyboard wants one.
vi.stubGlobal('CSS', { escape: (text: string) => text });
afterEach(cleanup);

function Reading({ start = '', error }: { start?: string; error?: string }) {
  const [value, setValue] = useState(start);
  return (
    <DecimalField label="Reading on the tape" note="0 to 400" value={value} onChange={setValue} min="0" max="400" unit="mm" error={error} />
  );
}

describe('DecimalField', () => {
  it('is stepped by its buttons and by arrow keys, and stops at its ends', async () => {
    const user = userEvent.setup();
    render(<Reading start="398" />);
    const input = screen.getByRole<HTMLInputElement>('textbox', { name: 'Reading on the tape' });
    const more = screen.getByRole<HTMLButtonElement>('button', { name: 'Reading on the tape: 1 more' });
    await user.click(more);
    expect(input.value).toBe('399');
    await user.click(input);
    await user.keyboard('{ArrowUp}{ArrowUp}');
    expect(input.value).toBe('400');
    expect(more.disabled).toBe(true);
    await user.keyboard('{Shift>}{ArrowDown}{/Shift}');
    expect(input.value).toBe('390');
  });

  it('leaves what was typed as it was typed', async () => {
    const user = userEvent.setup();
    render(<Reading />);
    const input = screen.getByRole<HTMLInputElement>('textbox');
    await user.type(input, '28a7');
    expect(input.value).toBe('28a7');
  });

  it('names its range, unit and error', () => {
    render(<Reading error="The back wall is 400 mm long." />);
    const input = screen.getByRole('textbox');
    expect(input.getAttribute('aria-invalid')).toBe('true');
    const words = (input.getAttribute('aria-describedby') ?? '').split(' ').map((id) => document.getElementById(id)?.textContent);
    expect(words).toEqual(['The back wall is 400 mm long.', '0 to 400', 'mm']);
  });
});

describe('ChoiceGroup', () => {
  it('is a radio group that arrow keys go round', async () => {
    const user = userEvent.setup();
    const chosen = vi.fn();
    function Walls() {
      const [wall, setWall] = useState<'left' | 'back' | 'right' | null>(null);
      return (
        <ChoiceGroup
          label="Which wall has the spot?"
          value={wall}
          onChange={(value) => {
            chosen(value);
            setWall(value);
          }}
          options={[
            { value: 'left', label: 'Left' },
            { value: 'back', label: 'Back' },
            { value: 'right', label: 'Right', isDisabled: true },
          ]}
        />
      );
    }
    render(<Walls />);
    screen.getByRole('radiogroup', { name: 'Which wall has the spot?' });
    await user.click(screen.getByRole('radio', { name: 'Left' }));
    await user.keyboard('{ArrowRight}');
    expect(chosen.mock.calls.map(([value]) => value)).toEqual(['left', 'back']);
    expect(screen.getByRole<HTMLInputElement>('radio', { name: 'Back' }).checked).toBe(true);
    expect(screen.getByRole<HTMLInputElement>('radio', { name: 'Right' }).disabled).toBe(true);
  });
});

describe('Button', () => {
  it('does nothing while busy and says what goes on, without leaving the tab order', async () => {
    const user = userEvent.setup();
    const pressed = vi.fn();
    const { rerender } = render(<Button onPress={pressed}>Keep this reading</Button>);
    await user.click(screen.getByRole('button', { name: 'Keep this reading' }));
    rerender(
      <Button onPress={pressed} busy="Keeping…">
        Keep this reading
      </Button>,
    );
    const button = screen.getByRole<HTMLButtonElement>('button');
    expect(button.textContent).toBe('Keeping…');
    expect(button.disabled).toBe(false);
    expect(button.getAttribute('aria-disabled')).toBe('true');
    await user.click(button);
    expect(pressed).toHaveBeenCalledTimes(1);
  });
});

describe('ErrorSummary', () => {
  it('takes the focus, leads to the field and marks the title', async () => {
    const user = userEvent.setup();
    document.title = 'Score – Fairlead';
    const fields = (errors: { id?: string; message: string }[], tries: number) => (
      <>
        <ErrorSummary errors={errors} focusKey={tries} />
        <TextField id="name" label="Name" value="" onChange={() => undefined} />
      </>
    );
    const { rerender } = render(fields([], 0));
    rerender(fields([{ id: 'name', message: 'Name: fill this in.' }], 1));
    expect(document.activeElement).toBe(screen.getByRole('alert'));
    expect(document.title).toBe('Error: Score – Fairlead');
    await user.click(screen.getByRole('link', { name: 'Name: fill this in.' }));
    expect(document.activeElement).toBe(screen.getByRole('textbox', { name: 'Name' }));
    rerender(fields([], 1));
    expect(document.title).toBe('Score – Fairlead');
  });
});

describe('FileDrop', () => {
  it('takes a chosen file, and the same one again', async () => {
    const user = userEvent.setup();
    const taken = vi.fn();
    render(<FileDrop label="Points as CSV" accept=".csv" onFile={taken} />);
    const file = new File(['team,points'], 'points.csv', { type: 'text/csv' });
    await user.upload(screen.getByLabelText('Points as CSV'), file);
    await user.upload(screen.getByLabelText('Points as CSV'), file);
    expect(taken).toHaveBeenCalledTimes(2);
    expect(taken).toHaveBeenLastCalledWith(file);
  });
});

describe('keptAt', () => {
  it('tells the time in the zone asked for', () => {
    expect(keptAt(new Date('2027-03-13T16:32:00Z'), 'America/Chicago')).toBe('Kept at 10:32');
  });
});

describe('what the server renders', () => {
  it('has no inline style, which the content security policy forbids', () => {
    const nothing = () => undefined;
    const html = renderToString(
      <>
        <Button tone="primary" busy="Keeping…">
          Keep
        </Button>
        <DecimalField label="a" value="1" onChange={nothing} error="x" />
        <ChoiceGroup label="b" value={null} onChange={nothing} options={[{ value: '1', label: '1', hint: 'one' }]} />
        <TextField label="c" value="" onChange={nothing} rows={3} />
        <SelectField label="d" value="" onChange={nothing} options={[]} placeholder="Choose one" />
        <CheckField label="e" checked onChange={nothing} />
        <FileDrop label="f" onFile={nothing} />
        <Progress label="g" value={1} max={3} />
        <Status text="" />
      </>,
    );
    expect(html).not.toMatch(/style=/);
  });
});
