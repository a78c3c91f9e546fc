/**
 * Points of a written test: a total, and optionally the points of its question groups, which settle ties. Points are whole
 * or half numbers, kept as decimal text.
 */
import * as z from 'zod/mini';
import {
  compareExact,
  exact,
  groupThousands,
  isHalfStep,
  readDecimal,
  sumExact,
  toShortText,
  tryExact,
  ZERO,
  type Exact,
} from '../exact';
import { decimalField, textField, UNKNOWN_FIELDS } from '../fields';

/** A group of questions whose points are also written down one by one. */
export interface QuestionGroup {
  /** Short and lasting: lower-case letters, digits and dashes. */
  key: string;
  name: string;
  /** Most points, decimal text. */
  max: string;
}

/** What a test is out of. The maxima of its groups, if it has any, add up to `max`. */
export interface TestShape {
  max: string;
  groups: readonly QuestionGroup[];
}

/** One team's points. With `groups` all groups are there and add up to `points`. */
export interface TestPoints {
  points: string;
  groups?: Record<string, string> | undefined;
}

const points = (text: string): string => groupThousands(text);

/** The most points of a test, a whole or half number above 0. */
export const testMaxField = (): z.ZodMiniType<string> =>
  decimalField({
    what: 'Write the most points of the test as a whole or half number, such as 30.',
    range: 'The most points of the test must be above 0 and a whole or half number.',
    above: true,
    most: exact(10_000),
    fits: isHalfStep,
  });

/** The question groups of a set-up: keys and names all different. That they add up is {@link groupsAddUp}'s to say. */
export const questionGroupsField = (): z.ZodMiniType<QuestionGroup[]> =>
  z
    .array(
      z.strictObject(
        {
          key: z
            .string('The group has no key.')
            .check(z.regex(/^[a-z0-9]+(?:-[a-z0-9]+)*$/, 'Use lower-case letters, digits and single dashes.'), z.maxLength(30, 'Keep the key within 30 characters.')),
          name: textField(60, { required: 'Give the group a name, such as Part A.', tooLong: 'Keep the name within 60 characters.' }),
          max: testMaxField(),
        },
        UNKNOWN_FIELDS,
      ),
      'List the question groups.',
    )
    .check(z.maxLength(20, 'A test can have up to 20 question groups.'), (ctx) => {
      for (const field of ['key', 'name'] as const) {
        const seen = new Set<string>();
        ctx.value.forEach((group, i) => {
          const word = group[field].toLowerCase();
          if (seen.has(word)) ctx.issues.push({ code: 'custom', message: `Two groups have the ${field} “${group[field]}”.`, path: [i, field], input: group[field] });
          seen.add(word);
        });
      }
    });

/** What to say when the groups' maxima do not add up to the test's, or null when all is well. */
export function groupsAddUp(shape: TestShape): string | null {
  if (shape.groups.length === 0) return null;
  const sum = sumExact(shape.groups.map((group) => exact(group.max)));
  if (compareExact(sum, exact(shape.max)) === 0) return null;
  return `The groups’ points add up to ${points(toShortText(sum))}, but the test is out of ${points(shape.max)}.`;
}

/**
 * Points of one team. Either the total or all groups must be there; with both, they must agree. Blank text counts as not there.
 * What comes out always has the total, in canonical decimal text, and passes again unchanged.
 */
export function testPointsSchema(shape: TestShape): z.ZodMiniType<TestPoints> {
  const input = z.strictObject(
    {
      points: z.optional(z.string('Write the points as a number, such as 12.5.')),
      groups: z.optional(z.record(z.string(), z.string('Write the points as a number, such as 12.5.'), 'Write the points of each group.')),
    },
    { error: (issue) => (issue.code === 'unrecognized_keys' ? UNKNOWN_FIELDS : 'Write the points of the test.') },
  );
  return z.pipe(
    input,
    z.transform((typed, ctx): TestPoints => {
      const refuse = (path: string[], message: string): null => {
        ctx.issues.push({ code: 'custom', message, path, input: typed });
        return null;
      };
      const read = (path: string[], text: string, max: string, whose: string): Exact | null => {
        const decimal = readDecimal(text);
        const value = decimal === null ? null : exact(decimal);
        if (value === null) return refuse(path, 'Write the points as a number, such as 12.5.');
        if (compareExact(value, ZERO) < 0 || compareExact(value, exact(max)) > 0) return refuse(path, `${whose} is out of ${points(max)}: the points can be 0 to ${points(max)}.`);
        if (!isHalfStep(value)) return refuse(path, 'Points go by whole or half numbers, such as 12 or 12.5.');
        return value;
      };

      const given = new Map(Object.entries(typed.groups ?? {}).filter(([, text]) => text.trim() !== ''));
      for (const key of given.keys()) {
        if (!shape.groups.some((group) => group.key === key)) refuse(['groups', key], 'This test has no such question group.');
      }
      const values = new Map<string, Exact>();
      if (given.size > 0) {
        for (const group of shape.groups) {
          const text = given.get(group.key);
          const value =
            text === undefined
              ? refuse(['groups', group.key], `Write the points of ${group.name} too, or leave all groups blank.`)
              : read(['groups', group.key], text, group.max, group.name);
          if (value !== null) values.set(group.key, value);
        }
      }
      const blank = typed.points === undefined || typed.points.trim() === '';
      const total = blank ? null : read(['points'], typed.points ?? '', shape.max, 'The test');
      if (blank && given.size === 0) refuse(['points'], 'Write the points of the test.');
      if (ctx.issues.length > 0) return z.NEVER;

      if (values.size === 0) return { points: toShortText(total ?? ZERO) };
      const sum = sumExact(values.values());
      if (total !== null && compareExact(sum, total) !== 0) {
        refuse(['points'], `The groups add up to ${points(toShortText(sum))}, but the total says ${points(toShortText(total))}.`);
        return z.NEVER;
      }
      return { points: toShortText(sum), groups: Object.fromEntries([...values].map(([key, value]) => [key, toShortText(value)])) };
    }),
  );
}

/** Whether points still fit the shape of the test; they may not after a set-up was changed. */
export function pointsFit(shape: TestShape, value: TestPoints): boolean {
  const fits = (text: string | undefined, max: string): boolean => {
    const number = tryExact(text);
    return number !== null && compareExact(number, ZERO) >= 0 && compareExact(number, exact(max)) <= 0 && isHalfStep(number);
  };
  if (!fits(value.points, shape.max)) return false;
  if (value.groups === undefined) return true;
  const keys = Object.keys(value.groups);
  return (
    keys.length === shape.groups.length &&
    shape.groups.every((group) => fits(value.groups?.[group.key], group.max)) &&
    compareExact(sumExact(Object.values(value.groups).map((text) => exact(text))), exact(value.points)) === 0
  );
}
