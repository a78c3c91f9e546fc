import { ChoiceGroup } from '~/components/react/ChoiceGroup';
import { DecimalField } from '~/components/react/DecimalField';
import { SelectField } from '~/components/react/SelectField';
import { TextField } from '~/components/react/TextField';
import { OrderForm } from '../order-form';
import { QuestionGroupsForm } from '../question-groups-form';
import type { SetupFormProps } from '../setup-forms';
import { LASER_CLASSES, TIE_BREAK_WORDS, type OpticsSetup } from './setup';

/** A whole number typed as text: kept as a number when it is one, else as typed so that nothing is lost. */
function whole(text: string): number {
  const trimmed = text.trim();
  return /^\d{1,6}$/.test(trimmed) ? Number(trimmed) : (trimmed as unknown as number);
}

/** What an office and a leader decide about an optics shoot. */
export function OpticsSetupForm({ setup, onChange, errors, isDisabled }: SetupFormProps<OpticsSetup>) {
  const set = (change: Partial<OpticsSetup>) => onChange({ ...setup, ...change });
  const weights = [setup.weights.accuracy, setup.weights.barriers, setup.weights.test];
  const sum = weights.every((w) => typeof w === 'number') ? weights.reduce((a, b) => a + b, 0) : null;
  const weight = (key: keyof OpticsSetup['weights'], label: string) => (
    <DecimalField
      id={`weights.${key}`}
      label={label}
      value={String(setup.weights[key])}
      step="5"
      min="0"
      max="100"
      error={errors[`weights.${key}`]}
      onChange={(v) => set({ weights: { ...setup.weights, [key]: whole(v) } })}
    />
  );
  return (
    <div className="stack gap-8">
      <section className="stack" aria-labelledby="profile-weights">
        <h2 id="profile-weights">What the score is made of</h2>
        <div className="grid gap-4 sm:grid-cols-3" id="weights" tabIndex={-1}>
          {weight('accuracy', 'Accuracy')}
          {weight('barriers', 'Barriers used')}
          {weight('test', 'Written test')}
        </div>
        <p className={sum === 100 ? 'small muted' : 'field-error'} aria-live="polite">
          {sum === null ? 'The three weights are whole numbers that add up to 100.' : sum === 100 ? 'The weights add up to 100.' : (errors['weights'] ?? `The weights add up to ${sum}: they must add up to 100.`)}
        </p>
        <div className="grid gap-4 sm:grid-cols-2">
          <DecimalField
            id="fullScale"
            label="Full scale"
            hint="At this distance and beyond, accuracy is worth nothing."
            unit="mm"
            value={setup.fullScale}
            step="10"
            error={errors['fullScale']}
            onChange={(fullScale) => set({ fullScale })}
          />
          <DecimalField id="testMax" label="Written test is out of" unit="points" value={setup.testMax} step="1" error={errors['testMax']} onChange={(testMax) => set({ testMax })} />
        </div>
        <TextField
          id="barrierRule"
          label="What counts as a barrier used"
          hint="In your office’s own words. The run desk shows it to whoever counts; nobody else decides."
          rows={3}
          width="full"
          value={setup.barrierRule}
          error={errors['barrierRule']}
          onChange={(barrierRule) => set({ barrierRule })}
        />
      </section>
      <OrderForm
        path="tieBreak"
        label="When scores are equal"
        hint="The first line that tells two teams apart decides. If none does, they share the place."
        order={setup.tieBreak}
        words={(key) => TIE_BREAK_WORDS[key]}
        onChange={(tieBreak) => set({ tieBreak })}
        error={errors['tieBreak']}
        isDisabled={isDisabled}
      />
      <section className="stack" aria-labelledby="profile-box">
        <h2 id="profile-box">The box, seen from above</h2>
        <div className="grid gap-4 sm:grid-cols-3">
          <DecimalField id="box.width" label="Inside width" hint="Left to right." unit="mm" value={setup.box.width} step="1" error={errors['box.width']} onChange={(width) => set({ box: { ...setup.box, width } })} />
          <DecimalField id="box.depth" label="Inside depth" hint="Front to back." unit="mm" value={setup.box.depth} step="1" error={errors['box.depth']} onChange={(depth) => set({ box: { ...setup.box, depth } })} />
          <DecimalField
            id="targetX"
            label="Target"
            hint="On the back wall, from the left corner."
            unit="mm"
            value={setup.targetX}
            step="1"
            error={errors['targetX']}
            onChange={(targetX) => set({ targetX })}
          />
        </div>
        <div className="grid gap-4 sm:grid-cols-3">
          <DecimalField
            id="mirrorsAllowed"
            label="Mirrors a team may use"
            value={String(setup.mirrorsAllowed)}
            step="1"
            min="0"
            max="20"
            error={errors['mirrorsAllowed']}
            onChange={(v) => set({ mirrorsAllowed: whole(v) })}
          />
          <DecimalField
            id="barriersStanding"
            label="Barriers standing"
            value={String(setup.barriersStanding)}
            step="1"
            min="1"
            max="20"
            error={errors['barriersStanding']}
            onChange={(v) => set({ barriersStanding: whole(v) })}
          />
        </div>
      </section>
      <section className="stack" aria-labelledby="profile-tapes">
        <h2 id="profile-tapes">Where each tape begins</h2>
        <div className="grid gap-4 sm:grid-cols-2 lg:grid-cols-4">
          {(['back', 'front'] as const).map((wall) => (
            <ChoiceGroup
              key={wall}
              id={`tapes.${wall}`}
              label={wall === 'back' ? 'Back wall' : 'Front wall'}
              columns={2}
              value={setup.tapes[wall]}
              error={errors[`tapes.${wall}`]}
              isDisabled={isDisabled}
              options={[
                { value: 'left', label: 'From left' },
                { value: 'right', label: 'From right' },
              ]}
              onChange={(end) => set({ tapes: { ...setup.tapes, [wall]: end } })}
            />
          ))}
          {(['left', 'right'] as const).map((wall) => (
            <ChoiceGroup
              key={wall}
              id={`tapes.${wall}`}
              label={wall === 'left' ? 'Left wall' : 'Right wall'}
              columns={2}
              value={setup.tapes[wall]}
              error={errors[`tapes.${wall}`]}
              isDisabled={isDisabled}
              options={[
                { value: 'front', label: 'From front' },
                { value: 'back', label: 'From back' },
              ]}
              onChange={(end) => set({ tapes: { ...setup.tapes, [wall]: end } })}
            />
          ))}
        </div>
      </section>
      <section className="stack" aria-labelledby="profile-laser">
        <h2 id="profile-laser">The laser</h2>
        <div className="grid gap-4 sm:grid-cols-[14rem_1fr]">
          <SelectField
            id="laser.class"
            label="Class on its label"
            value={setup.laser.class}
            options={LASER_CLASSES.map((c) => ({ value: c, label: c === 'not noted' ? 'Not noted yet' : `Class ${c}` }))}
            isDisabled={isDisabled}
            error={errors['laser.class']}
            onChange={(c) => set({ laser: { ...setup.laser, class: c as OpticsSetup['laser']['class'] } })}
          />
          <TextField id="laser.note" label="Note" isOptional hint="Colour, power in mW, which kit." value={setup.laser.note} error={errors['laser.note']} onChange={(note) => set({ laser: { ...setup.laser, note } })} />
        </div>
        <p className="small muted">
          Beam below eye level, a stop behind every mirror, nobody looks along the beam or through optics into it. Classes are those of IEC 60825-1; class 2 is at most 1 mW of visible light. Your
          local rules and licensed staff come first.
        </p>
      </section>
      <QuestionGroupsForm
        path="testGroups"
        groups={setup.testGroups}
        errors={errors}
        hint="Only if the test’s points are kept group by group. Together they are worth the whole test."
        isDisabled={isDisabled}
        onChange={(testGroups) => set({ testGroups })}
      />
    </div>
  );
}
