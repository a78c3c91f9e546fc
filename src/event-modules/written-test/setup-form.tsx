import { DecimalField } from '~/components/react/DecimalField';
import type { QuestionGroup } from '~/domain/scoring/test-points';
import { OrderForm } from '../order-form';
import { QuestionGroupsForm } from '../question-groups-form';
import type { SetupFormProps } from '../setup-forms';
import type { WrittenTestSetup } from './module';

/** What a written test is out of, its question groups, and which group settles a tie first. */
export function WrittenTestSetupForm({ setup, onChange, errors, isDisabled }: SetupFormProps<WrittenTestSetup>) {
  const setGroups = (groups: QuestionGroup[]) => {
    const keys = groups.map((g) => g.key).filter((k) => k !== '');
    onChange({ ...setup, groups, tieBreak: [...setup.tieBreak.filter((k) => keys.includes(k)), ...keys.filter((k) => !setup.tieBreak.includes(k))] });
  };
  return (
    <div className="stack gap-8">
      <section className="stack" aria-labelledby="profile-test">
        <h2 id="profile-test">The test</h2>
        <DecimalField id="max" label="The test is out of" unit="points" value={setup.max} step="1" error={errors['max']} onChange={(max) => onChange({ ...setup, max })} />
      </section>
      <QuestionGroupsForm
        path="groups"
        groups={setup.groups}
        errors={errors}
        hint="Name the groups whose points settle a tie. Together they are worth the whole test."
        isDisabled={isDisabled}
        onChange={setGroups}
      />
      {setup.tieBreak.length > 0 && (
        <OrderForm
          path="tieBreak"
          label="When points are equal"
          hint="More points in the first group that tells two teams apart decides. If none does, they share the place."
          order={setup.tieBreak}
          words={(key) => `More points in ${setup.groups.find((g) => g.key === key)?.name || 'the unnamed group'}`}
          onChange={(tieBreak) => onChange({ ...setup, tieBreak })}
          error={errors['tieBreak']}
          isDisabled={isDisabled}
        />
      )}
    </div>
  );
}
