import { Fragment, useState } from 'react';
import { ChoiceGroup } from '~/components/react/ChoiceGroup';
import { DecimalField } from '~/components/react/DecimalField';
import { TextField } from '~/components/react/TextField';
import { checkValue } from '~/domain/fields';
import { exactWallLength, tapeWords, WALLS, type Wall } from '~/domain/geometry/perimeter';
import { groupThousands, toShortText, type Exact } from '~/domain/exact';
import type { EntryFormProps } from '../entry-forms';
import { distanceRangeWords, opticsRunSchema, readingDistances, tapeRangeWords, type OpticsRun } from './run';
import { opticsBox, RUN_SECONDS, type OpticsSetup } from './setup';

interface Draft {
  reading?: { kind?: string; wall?: Wall; tape?: string; mm?: string };
  mirrorsUsed?: unknown;
  barriersUsed?: unknown;
  timeUsedSeconds?: string;
  remarks?: string;
}

const KINDS = [
  { value: 'tape', label: 'Wall and tape' },
  { value: 'distance', label: 'Distance' },
  { value: 'none', label: 'No spot' },
] as const;
const WALL_NAMES: Record<Wall, string> = { left: 'Left', back: 'Back', right: 'Right', front: 'Front' };
const WALL_ORDER: readonly Wall[] = ['left', 'back', 'right', 'front'];

const mm = (value: Exact) => `${groupThousands(toShortText(value))} mm`;

/** A whole number typed as text: kept as a number when it is one, else as typed so that nothing is lost. */
function whole(text: string): unknown {
  const trimmed = text.trim();
  return /^\d{1,6}$/.test(trimmed) ? Number(trimmed) : trimmed;
}

const typedText = (value: unknown): string => (typeof value === 'number' ? String(value) : typeof value === 'string' ? value : '');

/** Both ways round the box; the shorter counts. Shown as soon as the reading can be read. */
function BothWays({ setup, reading }: { setup: OpticsSetup; reading: unknown }) {
  const checked = checkValue(opticsRunSchema(setup), { reading, mirrorsUsed: 0, barriersUsed: 0 } as unknown as OpticsRun);
  if (!checked.ok) {
    return (
      <p className="muted small" aria-live="polite">
        The distance shows here as soon as the reading is complete.
      </p>
    );
  }
  const found = readingDistances(setup, checked.value.reading);
  if (found.shorter === null || found.longer === null) {
    return (
      <p aria-live="polite">
        <b>No spot on any wall.</b> <span className="muted">There is no distance, so accuracy counts nothing.</span>
      </p>
    );
  }
  const ways =
    found.clockwise && found.counterClockwise
      ? ([
          ['Counter-clockwise', found.counterClockwise, found.way === 'ccw' || found.way === 'tie'],
          ['Clockwise', found.clockwise, found.way === 'cw' || found.way === 'tie'],
        ] as const)
      : ([
          ['As measured', found.shorter, true],
          ['The other way round', found.longer, found.shorter.equals(found.longer)],
        ] as const);
  return (
    <div className="ways" aria-live="polite">
      <p className="ways-counts num">
        <b>{mm(found.shorter)}</b> <span className="muted">{found.way === 'tie' ? 'from the target, the same both ways round' : 'from the target, the shorter way round'}</span>
      </p>
      <dl className="definition num">
        {ways.map(([label, value, counts]) => (
          <Fragment key={label}>
            <dt>{label}</dt>
            <dd>
              {mm(value)} {counts && <span className="tag ok">counts</span>}
            </dd>
          </Fragment>
        ))}
      </dl>
    </div>
  );
}

/** One run at the box: where the spot was and what the team used. */
export function OpticsRunForm({ setup, draft, onChange, errors, onLeave, isDisabled }: EntryFormProps<OpticsSetup>) {
  const typed = (draft ?? {}) as Draft;
  const reading = typed.reading ?? {};
  const set = (change: Partial<Draft>) => onChange({ ...typed, ...change });
  // What was typed for another way of measuring is remembered, in case of a slip; only the chosen way is in the draft.
  const [remembered, setRemembered] = useState(reading);
  const setReading = (change: Draft['reading']) => {
    const all = { ...remembered, ...reading, ...change };
    setRemembered(all);
    set({ reading: chosenReading(all) as NonNullable<Draft['reading']> });
  };
  const wall = WALLS.includes(reading.wall as Wall) ? (reading.wall as Wall) : null;
  return (
    <div className="stack gap-6">
      <ChoiceGroup
        id="reading"
        label="How was the spot measured?"
        columns={3}
        value={(KINDS.find((k) => k.value === reading.kind)?.value ?? null) as 'tape' | 'distance' | 'none' | null}
        error={errors['reading'] ?? errors['reading.kind']}
        isDisabled={isDisabled}
        options={KINDS}
        onChange={(kind) => setReading({ kind })}
      />
      {reading.kind === 'tape' && (
        <>
          <ChoiceGroup
            id="reading.wall"
            label="Which wall has the spot?"
            note="as seen from the laser"
            columns={4}
            value={wall}
            error={errors['reading.wall']}
            isDisabled={isDisabled}
            options={WALL_ORDER.map((w) => ({ value: w, label: WALL_NAMES[w] }))}
            onChange={(w) => setReading({ wall: w })}
          />
          <DecimalField
            id="reading.tape"
            label="Reading on the tape"
            big
            unit="mm"
            note={wall ? `${wall} wall, ${tapeWords(wall, setup.tapes)}` : 'choose the wall first'}
            hint={wall ? tapeRangeWords(setup, wall) : undefined}
            step="1"
            min="0"
            max={wall ? toShortText(exactWallLength(opticsBox(setup), wall)) : undefined}
            value={reading.tape ?? ''}
            error={errors['reading.tape']}
            isDisabled={isDisabled}
            onBlur={() => onLeave('reading.tape')}
            onChange={(tape) => setReading({ tape })}
          />
        </>
      )}
      {reading.kind === 'distance' && (
        <DecimalField
          id="reading.mm"
          label="Distance from target to spot"
          big
          unit="mm"
          note="along the walls, the shorter way"
          hint={distanceRangeWords(setup)}
          step="1"
          min="0"
          value={reading.mm ?? ''}
          error={errors['reading.mm']}
          isDisabled={isDisabled}
          onBlur={() => onLeave('reading.mm')}
          onChange={(text) => setReading({ mm: text })}
        />
      )}
      {reading.kind && <BothWays setup={setup} reading={reading} />}
      <div className="grid items-start gap-6 sm:grid-cols-2">
        <DecimalField
          id="mirrorsUsed"
          label="Mirrors used"
          note={`0 to ${setup.mirrorsAllowed}`}
          step="1"
          min="0"
          max={String(setup.mirrorsAllowed)}
          value={typedText(typed.mirrorsUsed)}
          error={errors['mirrorsUsed']}
          isDisabled={isDisabled}
          onBlur={() => onLeave('mirrorsUsed')}
          onChange={(text) => set({ mirrorsUsed: whole(text) })}
        />
        <DecimalField
          id="barriersUsed"
          label="Barriers used"
          note={`0 to ${setup.barriersStanding}`}
          step="1"
          min="0"
          max={String(setup.barriersStanding)}
          value={typedText(typed.barriersUsed)}
          error={errors['barriersUsed']}
          isDisabled={isDisabled}
          onBlur={() => onLeave('barriersUsed')}
          onChange={(text) => set({ barriersUsed: whole(text) })}
        />
      </div>
      <p className="small muted">
        <b>Your office’s rule:</b> {setup.barrierRule}
      </p>
      <div className="grid items-start gap-6 sm:grid-cols-2">
        <DecimalField
          id="timeUsedSeconds"
          label="Time used"
          isOptional
          unit="s"
          note={`0 to ${RUN_SECONDS}`}
          step="1"
          min="0"
          max={String(RUN_SECONDS)}
          value={typed.timeUsedSeconds ?? ''}
          error={errors['timeUsedSeconds']}
          isDisabled={isDisabled}
          onBlur={() => onLeave('timeUsedSeconds')}
          onChange={(timeUsedSeconds) => set({ timeUsedSeconds })}
        />
        <TextField id="remarks" label="Remarks" isOptional width="full" value={typed.remarks ?? ''} error={errors['remarks']} onChange={(remarks) => set({ remarks })} />
      </div>
    </div>
  );
}

/** Only what belongs to the chosen way of measuring. */
function chosenReading(reading: NonNullable<Draft['reading']>): unknown {
  if (reading.kind === 'tape') return { kind: 'tape', wall: reading.wall, tape: reading.tape ?? '' };
  if (reading.kind === 'distance') return { kind: 'distance', mm: reading.mm ?? '' };
  return { kind: reading.kind };
}
