/** One run of an optics shoot: where the spot was, and what the team used. */
import * as z from 'zod/mini';
import { exact, groupThousands, toShortText, type Exact } from '~/domain/exact';
import { choiceField, decimalField, textField, UNKNOWN_FIELDS, wholeField } from '~/domain/fields';
import {
  directDistance,
  exactPerimeter,
  exactPerimeterDistance,
  exactWallLength,
  tapeToOffset,
  tapeWords,
  WALLS,
  type Wall,
  type Way,
} from '~/domain/geometry/perimeter';
import type { Line } from '../contract';
import { opticsBox, RUN_SECONDS, type OpticsSetup } from './setup';

/** A wall and the tape's number on it, or the distance measured directly along the walls, or no spot on any wall. */
export type Reading = { kind: 'tape'; wall: Wall; tape: string } | { kind: 'distance'; mm: string } | { kind: 'none' };

export interface OpticsRun {
  reading: Reading;
  mirrorsUsed: number;
  barriersUsed: number;
  /** Decimal text, 0 to {@link RUN_SECONDS}. */
  timeUsedSeconds?: string | undefined;
  remarks?: string | undefined;
}

/** A reading's way round the box, exactly, mm. */
export interface ReadingDistances {
  perimeter: Exact;
  /** The spot's offset on its wall; null unless read by tape. */
  offset: Exact | null;
  /** The two ways from spot to target, as seen from above; null unless read by tape. */
  counterClockwise: Exact | null;
  clockwise: Exact | null;
  way: Way | null;
  /** What counts: the shorter way, or the distance as measured; null without a spot. */
  shorter: Exact | null;
  /** The way that does not count; null without a spot. */
  longer: Exact | null;
}

/**
 * Both ways round and the shorter. The form, the server and the score all ask this one function.
 * @throws DomainError `bad-offset` or `bad-distance` when the reading does not fit the box.
 */
export function readingDistances(setup: OpticsSetup, reading: Reading): ReadingDistances {
  const box = opticsBox(setup);
  const perimeter = exactPerimeter(box);
  const none = { perimeter, offset: null, counterClockwise: null, clockwise: null, way: null, shorter: null, longer: null };
  switch (reading.kind) {
    case 'none':
      return none;
    case 'distance': {
      const shorter = directDistance(box, reading.mm);
      return { ...none, shorter, longer: perimeter.sub(shorter) };
    }
    case 'tape': {
      const offset = tapeToOffset(box, reading.wall, reading.tape, setup.tapes);
      const { ccw, cw, shorter, way } = exactPerimeterDistance({ box, tx: setup.targetX, hit: { wall: reading.wall, offset } });
      return { perimeter, offset, counterClockwise: ccw, clockwise: cw, way, shorter, longer: perimeter.sub(shorter) };
    }
  }
}

const words = (value: Exact): string => groupThousands(toShortText(value));

/** What a tape on this wall can show, for a hint and for its error: 'The back wall is 1,000 mm long: …'. */
export function tapeRangeWords(setup: OpticsSetup, wall: Wall): string {
  const length = words(exactWallLength(opticsBox(setup), wall));
  return `The ${wall} wall is ${length} mm long: the reading can be 0 to ${length}.`;
}

/** How far a spot can be at most, for a hint and for its error. */
export function distanceRangeWords(setup: OpticsSetup): string {
  const most = words(exactPerimeter(opticsBox(setup)).div(2));
  return `Half way round the box is ${most} mm: the distance can be 0 to ${most}.`;
}


/** Said when mirrors used is not a whole number within what is allowed. */
export function mirrorsRangeWords(setup: OpticsSetup): string {
  const { mirrorsAllowed: n } = setup;
  if (n === 0) return 'No mirrors may be used: write 0.';
  return `A team may use up to ${n} mirror${n === 1 ? '' : 's'}: write a whole number from 0 to ${n}.`;
}

/** Said when barriers used is not a whole number within those standing. */
export function barriersRangeWords(setup: OpticsSetup): string {
  const { barriersStanding: n } = setup;
  return `${n} barrier${n === 1 ? ' stands' : 's stand'} in the box: write a whole number from 0 to ${n}.`;
}

function readingSchema(setup: OpticsSetup): z.ZodMiniType<Reading> {
  const box = opticsBox(setup);
  const tape = z
    .strictObject(
      {
        kind: z.literal('tape'),
        wall: choiceField(WALLS, 'Choose the wall the spot is on.'),
        tape: decimalField({ what: 'Write the tape’s number in millimetres with at most one decimal, such as 612.5.', least: exact(-1_000_000) }),
      },
      UNKNOWN_FIELDS,
    )
    .check((ctx) => {
      const value = exact(ctx.value.tape);
      if (value.s < 0n || value.compare(exactWallLength(box, ctx.value.wall)) > 0) {
        ctx.issues.push({ code: 'custom', message: tapeRangeWords(setup, ctx.value.wall), path: ['tape'], input: ctx.value.tape });
      }
    });
  const distance = z.strictObject(
    {
      kind: z.literal('distance'),
      mm: decimalField({
        what: 'Write the distance in millimetres with at most one decimal, such as 112.5.',
        range: distanceRangeWords(setup),
        most: exactPerimeter(box).div(2),
      }),
    },
    UNKNOWN_FIELDS,
  );
  const none = z.strictObject({ kind: z.literal('none') }, UNKNOWN_FIELDS);
  return z.discriminatedUnion('kind', [tape, distance, none], {
    error: 'Choose how the spot was measured: by wall and tape, by distance, or no spot on any wall.',
  });
}

/** Optional texts that are blank are not there. */
function dropBlanks(value: unknown): unknown {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) return value;
  const optional = ['timeUsedSeconds', 'remarks'];
  return Object.fromEntries(
    Object.entries(value).filter(([key, text]) => !optional.includes(key) || !(text === null || (typeof text === 'string' && text.trim() === ''))),
  );
}

/** Takes one complete run for this set-up. */
export function opticsRunSchema(setup: OpticsSetup): z.ZodMiniType<OpticsRun> {
  const time = `The clock runs ${RUN_SECONDS} seconds: write the seconds used, 0 to ${RUN_SECONDS}, or leave it blank.`;
  return z.pipe(
    z.transform(dropBlanks),
    z.strictObject(
      {
        reading: readingSchema(setup),
        mirrorsUsed: wholeField(0, setup.mirrorsAllowed, mirrorsRangeWords(setup)),
        barriersUsed: wholeField(0, setup.barriersStanding, barriersRangeWords(setup)),
        timeUsedSeconds: z.optional(decimalField({ what: time, most: exact(RUN_SECONDS) })),
        remarks: z.optional(textField(500, { tooLong: 'Keep the remarks within 500 characters.' })),
      },
      { error: (issue) => (issue.code === 'unrecognized_keys' ? UNKNOWN_FIELDS : 'Write down the run.') },
    ),
  );
}

/** 'back wall, tape 612.5: 112.5 mm; 3 mirrors, 2 barriers used'. */
export function describeRun(setup: OpticsSetup, run: OpticsRun): string {
  const { reading } = run;
  const { shorter } = readingDistances(setup, reading);
  const spot =
    reading.kind === 'none'
      ? 'no spot on any wall'
      : reading.kind === 'distance'
        ? `${words(exact(reading.mm))} mm, measured directly`
        : `${reading.wall} wall, tape ${groupThousands(reading.tape)}: ${words(shorter ?? exact(0))} mm`;
  const count = (n: number, noun: string): string => `${n} ${noun}${n === 1 ? '' : 's'}`;
  const time = run.timeUsedSeconds === undefined ? '' : `, ${run.timeUsedSeconds} s`;
  return `${spot}; ${count(run.mirrorsUsed, 'mirror')}, ${count(run.barriersUsed, 'barrier')} used${time}`;
}

/** The run line by line, with both ways round and the one that counts. */
export function runWorkings(setup: OpticsSetup, run: OpticsRun): Line[] {
  const { reading } = run;
  const { counterClockwise, clockwise, shorter, longer, way } = readingDistances(setup, reading);
  const length = (value: Exact | null): string => (value === null ? 'none' : `${words(value)} mm`);
  const spot =
    reading.kind === 'none'
      ? 'no spot on any wall'
      : reading.kind === 'distance'
        ? 'distance measured directly'
        : `${reading.wall} wall, tape ${groupThousands(reading.tape)} mm, ${tapeWords(reading.wall, setup.tapes)}`;
  const ways: Line[] =
    reading.kind === 'tape'
      ? [
          { label: 'Counter-clockwise', value: length(counterClockwise) },
          { label: 'Clockwise', value: length(clockwise) },
        ]
      : reading.kind === 'distance'
        ? [{ label: 'The other way round', value: length(longer) }]
        : [];
  return [
    { label: 'Spot', value: spot },
    ...ways,
    { label: 'Distance that counts', value: shorter === null ? 'none' : `${length(shorter)}${way === 'tie' ? ', the same both ways' : ''}` },
    { label: 'Mirrors used', value: `${run.mirrorsUsed} of ${setup.mirrorsAllowed}` },
    { label: 'Barriers used', value: `${run.barriersUsed} of ${setup.barriersStanding}` },
    ...(run.timeUsedSeconds === undefined ? [] : [{ label: 'Time used', value: `${run.timeUsedSeconds} s` }]),
    ...(run.remarks === undefined ? [] : [{ label: 'Remarks', value: run.remarks }]),
  ];
}
