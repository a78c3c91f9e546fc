import { DecimalField } from '~/components/react/DecimalField';
import { groupThousands } from '~/domain/exact';
import type { TestShape } from '~/domain/scoring/test-points';
import type { EntryFormProps } from './entry-forms';
import type { OpticsSetup } from './optics-shoot/setup';
import type { WrittenTestSetup } from './written-test/module';

interface Draft {
  points?: string;
  groups?: Record<string, string>;
}

function TestForm({ shape, draft, onChange, errors, onLeave, isDisabled }: Omit<EntryFormProps, 'setup'> & { shape: TestShape }) {
  const typed = (draft ?? {}) as Draft;
  const grouped = shape.groups.length > 0;
  return (
    <div className="stack">
      <DecimalField
        id="points"
        label="Test points"
        big
        unit="points"
        note={`0 to ${groupThousands(shape.max)}, whole or half`}
        hint={grouped ? 'Leave this blank if you write down the groups: they are added up.' : undefined}
        step="1"
        min="0"
        max={shape.max}
        value={typed.points ?? ''}
        error={errors['points'] ?? errors['']}
        isDisabled={isDisabled}
        onBlur={() => onLeave('points')}
        onChange={(points) => onChange({ ...typed, points })}
      />
      {grouped && (
        <fieldset className="stack">
          <legend className="label">By question group</legend>
          <div className="grid gap-4 sm:grid-cols-2">
            {shape.groups.map((group) => (
              <DecimalField
                key={group.key}
                id={`groups.${group.key}`}
                label={group.name}
                isOptional
                note={`0 to ${groupThousands(group.max)}`}
                step="1"
                min="0"
                max={group.max}
                value={typed.groups?.[group.key] ?? ''}
                error={errors[`groups.${group.key}`]}
                isDisabled={isDisabled}
                onBlur={() => onLeave(`groups.${group.key}`)}
                onChange={(points) => onChange({ ...typed, groups: { ...typed.groups, [group.key]: points } })}
              />
            ))}
          </div>
          {errors['groups'] && <p className="field-error">{errors['groups']}</p>}
        </fieldset>
      )}
    </div>
  );
}

/** The written test of an optics shoot. */
export function opticsTestForm({ setup, ...rest }: EntryFormProps<OpticsSetup>) {
  return <TestForm {...rest} shape={{ max: setup.testMax, groups: setup.testGroups }} />;
}

/** The test of a written-test event. */
export function writtenTestForm({ setup, ...rest }: EntryFormProps<WrittenTestSetup>) {
  return <TestForm {...rest} shape={{ max: setup.max, groups: setup.groups }} />;
}
