/** What a set-up of an optics shoot may be. Apart from its type, so that a run's form does not fetch it. */
import * as z from 'zod/mini';
import { compareExact, exact, groupThousands } from '~/domain/exact';
import { choiceField, decimalField, orderField, textField, UNKNOWN_FIELDS, wholeField } from '~/domain/fields';
import { OPTICS_TIE_BREAKS } from '~/domain/scoring/optics';
import { groupsAddUp, questionGroupsField, testMaxField } from '~/domain/scoring/test-points';
import { LASER_CLASSES, type OpticsSetup } from './setup';

const length = (name: string, example: string): { what: string } => ({
  what: `Write the ${name} in millimetres with at most one decimal, such as ${example}.`,
});
const WEIGHT = 'Write a whole number from 0 to 100.';
const TAPE_ENDS = 'Choose the end of the wall where the tape’s zero lies.';

const weightsSchema = z
  .strictObject({ accuracy: wholeField(0, 100, WEIGHT), barriers: wholeField(0, 100, WEIGHT), test: wholeField(0, 100, WEIGHT) }, UNKNOWN_FIELDS)
  .check((ctx) => {
    const sum = ctx.value.accuracy + ctx.value.barriers + ctx.value.test;
    if (sum !== 100) {
      ctx.issues.push({ code: 'custom', message: `The weights add up to ${sum}: they must add up to 100.`, input: ctx.value });
    }
  });

/** Takes the complete set-up. */
export const opticsSetupSchema: z.ZodMiniType<OpticsSetup> = z
  .strictObject(
    {
      box: z.strictObject(
        {
          width: decimalField({ ...length('inside width', '1000'), range: 'The box must be more than 0 and at most 100,000 mm wide.', above: true, most: exact(100_000) }),
          depth: decimalField({ ...length('inside depth', '600'), range: 'The box must be more than 0 and at most 100,000 mm deep.', above: true, most: exact(100_000) }),
        },
        UNKNOWN_FIELDS,
      ),
      targetX: decimalField({ ...length('target’s distance from the left corner', '500'), range: 'The target can’t be left of the back wall: write 0 or more.' }),
      mirrorsAllowed: wholeField(0, 20, 'Write how many mirrors a team may use: a whole number from 0 to 20.'),
      barriersStanding: wholeField(1, 20, 'Write how many barriers stand in the box: a whole number from 1 to 20.'),
      laser: z.strictObject(
        {
          class: choiceField(LASER_CLASSES, 'Choose the class on the laser’s label.'),
          note: textField(200, { tooLong: 'Keep the note on the laser within 200 characters.' }),
        },
        UNKNOWN_FIELDS,
      ),
      weights: weightsSchema,
      fullScale: decimalField({ ...length('full scale', '600'), range: 'The full scale must be more than 0 and at most 1,000,000 mm.', above: true, most: exact(1_000_000) }),
      testMax: testMaxField(),
      testGroups: questionGroupsField(),
      barrierRule: textField(500, {
        required: 'Say what counts as a barrier used: the run desk shows it to whoever counts.',
        tooLong: 'Keep the rule within 500 characters.',
      }),
      tieBreak: orderField(OPTICS_TIE_BREAKS, 'Put all five tie-breaks in order, each once.'),
      tapes: z.strictObject(
        {
          front: choiceField(['left', 'right'], TAPE_ENDS),
          back: choiceField(['left', 'right'], TAPE_ENDS),
          left: choiceField(['front', 'back'], TAPE_ENDS),
          right: choiceField(['front', 'back'], TAPE_ENDS),
        },
        UNKNOWN_FIELDS,
      ),
    },
    { error: (issue) => (issue.code === 'unrecognized_keys' ? UNKNOWN_FIELDS : 'The set-up is missing.') },
  )
  .check((ctx) => {
    const { targetX, box, testMax, testGroups } = ctx.value;
    if (compareExact(exact(targetX), exact(box.width)) > 0) {
      const width = groupThousands(box.width);
      ctx.issues.push({ code: 'custom', message: `The back wall is ${width} mm long: the target can be 0 to ${width} from the left corner.`, path: ['targetX'], input: targetX });
    }
    const sum = groupsAddUp({ max: testMax, groups: testGroups });
    if (sum !== null) ctx.issues.push({ code: 'custom', message: sum, path: ['testGroups'], input: testGroups });
  });
