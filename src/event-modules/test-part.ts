/** The written test as a part, shared by every kind of event that has one. */
import { csvNumber, type CsvCell } from '~/domain/csv';
import { exact, groupThousands, roundHalfUp } from '~/domain/exact';
import { checkValue } from '~/domain/fields';
import { testPointsSchema, type TestPoints, type TestShape } from '~/domain/scoring/test-points';
import type { EventPart, PartCsvField } from './contract';

const GROUP = 'group.';
const half = (max: string): string => roundHalfUp(exact(max).div(2), 0);

/** A part `test` whose shape is read from the set-up. */
export function testPart<Setup>(shapeOf: (setup: Setup) => TestShape): EventPart<Setup, 'test', TestPoints> {
  const fields = (setup: Setup): PartCsvField[] => {
    const shape = shapeOf(setup);
    return [
      { key: 'points', header: 'Test points', example: half(shape.max) },
      ...shape.groups.map((group) => ({ key: GROUP + group.key, header: group.name, example: '' })),
    ];
  };
  return {
    key: 'test',
    name: 'Written test',
    schema: (setup) => testPointsSchema(shapeOf(setup)),
    describe: (setup, value) => `${groupThousands(value.points)} of ${groupThousands(shapeOf(setup).max)} points`,
    workings: (setup, value) => {
      const shape = shapeOf(setup);
      const line = (label: string, points: string, max: string) => ({ label, value: `${groupThousands(points)} of ${groupThousands(max)}` });
      return [
        line('Test points', value.points, shape.max),
        ...shape.groups.flatMap((group) => {
          const points = value.groups?.[group.key];
          return points === undefined ? [] : [line(group.name, points, group.max)];
        }),
      ];
    },
    nothing: () => ({ points: '0' }),
    csv: {
      fields,
      parseCsvRow: (setup, cells) => {
        const groups = Object.fromEntries(shapeOf(setup).groups.map((group) => [group.key, cells[GROUP + group.key] ?? '']));
        const result = checkValue(testPointsSchema(shapeOf(setup)), { points: cells['points'] ?? '', groups });
        if (result.ok) return result;
        return { ok: false, fields: result.fields.map(({ path, message }) => ({ path: path.replace(/^groups\./, GROUP), message })) };
      },
      toCsvCells: (setup, value): CsvCell[] => testCells(shapeOf(setup), value),
    },
  };
}

/** Points and group points in the order of the columns; null where there are none. */
export function testCells(shape: TestShape, value: TestPoints | undefined): CsvCell[] {
  const cell = (text: string | undefined): CsvCell => (text === undefined ? null : csvNumber(text));
  return [cell(value?.points), ...shape.groups.map((group) => cell(value?.groups?.[group.key]))];
}
