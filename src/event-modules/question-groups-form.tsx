import { Button } from '~/components/react/Button';
import { DecimalField } from '~/components/react/DecimalField';
import { TextField } from '~/components/react/TextField';
import type { QuestionGroup } from '~/domain/scoring/test-points';

/** A key from a name: 'Part A' gives 'part-a', made different from the others. */
export function groupKey(name: string, taken: readonly string[]): string {
  const base =
    name
      .normalize('NFKD')
      .replace(/[\u0300-\u036f]/g, '')
      .toLowerCase()
      .replace(/[^a-z0-9]+/g, '-')
      .replace(/^-+|-+$/g, '')
      .slice(0, 24) || 'group';
  let key = base;
  for (let n = 2; taken.includes(key); n++) key = `${base}-${n}`;
  return key;
}

/** The question groups of a test: names, most points, as many as wanted. */
export function QuestionGroupsForm(props: {
  groups: readonly QuestionGroup[];
  onChange: (groups: QuestionGroup[]) => void;
  errors: Readonly<Record<string, string>>;
  /** The field's path in the set-up: 'groups' or 'testGroups'. */
  path: string;
  hint: string;
  isDisabled: boolean;
}) {
  const { groups, onChange, errors, path } = props;
  const set = (i: number, change: Partial<QuestionGroup>) => onChange(groups.map((g, j) => (j === i ? { ...g, ...change } : g)));
  return (
    <fieldset className="field stack" disabled={props.isDisabled} id={path} tabIndex={-1}>
      <legend className="label">Question groups</legend>
      <p className="hint">{props.hint}</p>
      {errors[path] && <p className="field-error">{errors[path]}</p>}
      {groups.map((group, i) => (
        <div key={i} className="grid items-start gap-3 sm:grid-cols-[1fr_13rem_auto]">
          <TextField
            id={`${path}.${i}.name`}
            label={`Group ${i + 1}`}
            value={group.name}
            error={errors[`${path}.${i}.name`] ?? errors[`${path}.${i}.key`]}
            onChange={(name) => set(i, { name })}
            onBlur={() => {
              // The key lasts; it follows the name only until the name has been given.
              if (group.key === '' && group.name.trim() !== '') set(i, { key: groupKey(group.name, groups.map((g) => g.key)) });
            }}
          />
          <DecimalField id={`${path}.${i}.max`} label="Most points" value={group.max} error={errors[`${path}.${i}.max`]} step="0.5" onChange={(max) => set(i, { max })} />
          <div className="sm:pt-6">
            <Button tone="quiet" onPress={() => onChange(groups.filter((_, j) => j !== i))} isDisabled={props.isDisabled}>
              Remove<span className="sr-only"> {group.name.trim() || `group ${i + 1}`}</span>
            </Button>
          </div>
        </div>
      ))}
      <div>
        <Button onPress={() => onChange([...groups, { key: '', name: '', max: '' }])} isDisabled={props.isDisabled || groups.length >= 20}>
          Add a group
        </Button>
      </div>
    </fieldset>
  );
}
