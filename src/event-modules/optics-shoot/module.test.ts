import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exact, toDecimalText, toRatioText } from '~/domain/exact';
import { checkValue } from '~/domain/fields';
import { perimeterDistance, WALLS } from '~/domain/geometry/perimeter';
import { opticsRank, opticsScore } from '~/domain/scoring/optics';
import { opticsShoot } from './module';
import { describeRun, opticsRunSchema, readingDistances, runWorkings, type OpticsRun, type Reading } from './run';
import { opticsDefaults, opticsFindings, opticsPublic, opticsRules, opticsSummary, type OpticsSetup } from './setup';
import { opticsSetupSchema } from './setup-schema';

const SETUP: OpticsSetup = { ...opticsDefaults(), barriersStanding: 3 };
const RUN: OpticsRun = { reading: { kind: 'tape', wall: 'back', tape: '612.5' }, mirrorsUsed: 3, barriersUsed: 2 };
const messages = (value: unknown, setup = SETUP): Record<string, string> => {
  const result = checkValue(opticsRunSchema(setup), value);
  return result.ok ? {} : Object.fromEntries(result.fields.map(({ path, message }) => [path, message]));
};
const kept = (value: unknown, setup = SETUP): OpticsRun | null => {
  const result = checkValue(opticsRunSchema(setup), value);
  return result.ok ? result.value : null;
};
const reading = (value: unknown) => ({ ...RUN, reading: value });
const distances = (value: Reading, setup = SETUP) => {
  const { shorter, longer, way } = readingDistances(setup, value);
  return [shorter && toDecimalText(shorter), longer && toDecimalText(longer), way];
};

describe('a run, as it is typed', () => {
  it('is kept in canonical form, and once more unchanged', () => {
    const run = kept({ reading: { kind: 'tape', wall: 'back', tape: ' 0612,50 ' }, mirrorsUsed: 3, barriersUsed: 2, timeUsedSeconds: '', remarks: ' \n' });
    expect(run).toEqual(RUN);
    expect(kept(run)).toEqual(run);
    const full = { ...RUN, timeUsedSeconds: '239.5', remarks: 'Spot at the edge of the mirror' };
    expect(kept(full)).toEqual(full);
    expect(kept({ ...RUN, timeUsedSeconds: null })).toEqual(RUN);
  });

  it.each([
    ['back', '1000', true],
    ['back', '1000.1', false],
    ['front', '0', true],
    ['front', '-0.1', false],
    ['left', '600', true],
    ['left', '600.1', false],
    ['right', '1000', false],
  ])('on the %s wall %s mm is inside: %s', (wall, tape, inside) => {
    const length = wall === 'left' || wall === 'right' ? '600' : '1,000';
    const said = messages(reading({ kind: 'tape', wall, tape }));
    expect(said).toEqual(inside ? {} : { 'reading.tape': `The ${wall} wall is ${length} mm long: the reading can be 0 to ${length}.` });
  });

  it.each([
    [reading({ kind: 'tape', wall: 'back', tape: '612.55' }), 'reading.tape', 'Write the tape’s number in millimetres with at most one decimal, such as 612.5.'],
    [reading({ kind: 'tape', wall: 'back', tape: '' }), 'reading.tape', 'Write the tape’s number in millimetres with at most one decimal, such as 612.5.'],
    [reading({ kind: 'tape', wall: 'back' }), 'reading.tape', 'Write the tape’s number in millimetres with at most one decimal, such as 612.5.'],
    [reading({ kind: 'tape', wall: 'roof', tape: '1' }), 'reading.wall', 'Choose the wall the spot is on.'],
    [reading({ kind: 'distance', mm: '1600.1' }), 'reading.mm', 'Half way round the box is 1,600 mm: the distance can be 0 to 1,600.'],
    [reading({ kind: 'distance', mm: '-1' }), 'reading.mm', 'Half way round the box is 1,600 mm: the distance can be 0 to 1,600.'],
    [reading({ kind: 'distance', mm: 'x' }), 'reading.mm', 'Write the distance in millimetres with at most one decimal, such as 112.5.'],
    [reading({ kind: 'guess' }), 'reading.kind', 'Choose how the spot was measured: by wall and tape, by distance, or no spot on any wall.'],
    [{ mirrorsUsed: 0, barriersUsed: 0 }, 'reading', 'Choose how the spot was measured: by wall and tape, by distance, or no spot on any wall.'],
    [{ ...RUN, mirrorsUsed: 6 }, 'mirrorsUsed', 'A team may use up to 5 mirrors: write a whole number from 0 to 5.'],
    [{ ...RUN, mirrorsUsed: -1 }, 'mirrorsUsed', 'A team may use up to 5 mirrors: write a whole number from 0 to 5.'],
    [{ ...RUN, mirrorsUsed: 2.5 }, 'mirrorsUsed', 'A team may use up to 5 mirrors: write a whole number from 0 to 5.'],
    [{ ...RUN, barriersUsed: 4 }, 'barriersUsed', '3 barriers stand in the box: write a whole number from 0 to 3.'],
    [{ ...RUN, timeUsedSeconds: '240.1' }, 'timeUsedSeconds', 'The clock runs 240 seconds: write the seconds used, 0 to 240, or leave it blank.'],
    [{ ...RUN, remarks: 'x'.repeat(501) }, 'remarks', 'Keep the remarks within 500 characters.'],
    [{ ...RUN, distance: '3' }, '', 'Something here does not belong to this form. Load the page again.'],
    [reading({ kind: 'none', wall: 'back' }), 'reading', 'Something here does not belong to this form. Load the page again.'],
  ])('%j is refused beside %s', (value, path, message) => expect(messages(value)).toMatchObject({ [path]: message }));

  it('names several fields at once', () => {
    expect(Object.keys(messages({ reading: { kind: 'distance', mm: '9999' }, mirrorsUsed: 9, barriersUsed: 9 })).sort()).toEqual(['barriersUsed', 'mirrorsUsed', 'reading.mm']);
  });
  it('speaks of one barrier and of no mirrors', () => {
    const setup = { ...SETUP, barriersStanding: 1, mirrorsAllowed: 0 };
    expect(messages({ ...RUN, barriersUsed: 2, mirrorsUsed: 1 }, setup)).toEqual({
      barriersUsed: '1 barrier stands in the box: write a whole number from 0 to 1.',
      mirrorsUsed: 'No mirrors may be used: write 0.',
    });
  });
});

describe('a reading’s distances', () => {
  it.each<[Reading, (string | null)[]]>([
    [{ kind: 'tape', wall: 'back', tape: '500' }, ['0', '3200', 'none']],
    [{ kind: 'tape', wall: 'back', tape: '612.5' }, ['112.5', '3087.5', 'ccw']],
    [{ kind: 'tape', wall: 'back', tape: '1000' }, ['500', '2700', 'ccw']],
    [{ kind: 'tape', wall: 'right', tape: '600' }, ['500', '2700', 'ccw']],
    [{ kind: 'tape', wall: 'front', tape: '0' }, ['1100', '2100', 'cw']],
    [{ kind: 'tape', wall: 'left', tape: '0' }, ['1100', '2100', 'cw']],
    [{ kind: 'tape', wall: 'front', tape: '500' }, ['1600', '1600', 'tie']],
    [{ kind: 'distance', mm: '1600' }, ['1600', '1600', null]],
    [{ kind: 'distance', mm: '0.1' }, ['0.1', '3199.9', null]],
    [{ kind: 'none' }, [null, null, null]],
  ])('%j', (value, wanted) => expect(distances(value)).toEqual(wanted));

  it('follow the tape where it begins at the other end', () => {
    const setup: OpticsSetup = { ...SETUP, tapes: { front: 'right', back: 'right', left: 'back', right: 'back' } };
    expect(distances({ kind: 'tape', wall: 'back', tape: '387.5' }, setup)).toEqual(['112.5', '3087.5', 'ccw']);
    expect(distances({ kind: 'tape', wall: 'right', tape: '0' }, setup)).toEqual(['500', '2700', 'ccw']);
  });

  it('agree with the same walk in plain numbers, and the text given to the score is exact', () => {
    const size = fc.integer({ min: 1, max: 40_000 });
    const text = (n: number): string => toDecimalText(exact(n).div(10)) ?? '';
    fc.assert(
      fc.property(size, size, fc.constantFrom(...WALLS), fc.nat(), fc.nat(), (W, D, wall, a, b) => {
        const tx = a % (W + 1);
        const offset = b % ((wall === 'front' || wall === 'back' ? W : D) + 1);
        const setup: OpticsSetup = { ...SETUP, box: { width: text(W), depth: text(D) }, targetX: text(tx) };
        const out = readingDistances(setup, { kind: 'tape', wall, tape: text(offset) });
        const numbers = perimeterDistance({ box: { W: W / 10, D: D / 10 }, target: { tx: tx / 10 }, hit: { wall, offset: offset / 10 } });
        expect(out.shorter?.valueOf()).toBeCloseTo(numbers.shorter, 7);
        expect(out.counterClockwise?.valueOf()).toBeCloseTo(numbers.ccw, 7);
        expect(out.way).toBe(numbers.way);
        expect(out.shorter === null ? null : toDecimalText(out.shorter)).not.toBeNull();
      }),
    );
  });
});

describe('the score', () => {
  const parts = { run: RUN, test: { points: '25' } };

  it('is what opticsScore gives for the exact distance', () => {
    const result = opticsShoot.score(SETUP, parts);
    const wanted = opticsScore({ rules: opticsRules(SETUP), team: { team: 'T', d: '112.5', barriersUsed: 2, testRaw: '25' } });
    expect(result.score && toRatioText(result.score)).toBe(wanted.score);
    expect(result.display).toBe(wanted.display);
    expect(result.details.map(({ key, display }) => [key, display])).toEqual([
      ['distance', '112.5 mm'],
      ['accuracy', '40.63 of 50'],
      ['barriers', '13.33 of 20'],
      ['test', '25.00 of 30'],
    ]);
    const shares = result.details.slice(1).map((line) => {
      const [p = '0', q = '1'] = (line.exact ?? '').split('/');
      return exact(p).div(exact(q));
    });
    expect(toRatioText(shares.reduce((sum, share) => sum.add(share), exact(0)))).toBe(wanted.score);
  });

  it('shows what is there while a part is missing', () => {
    expect(opticsShoot.score(SETUP, { run: RUN }).details.map(({ key }) => key)).toEqual(['distance', 'accuracy', 'barriers']);
    expect(opticsShoot.score(SETUP, { test: { points: '25' } }).details.map(({ key }) => key)).toEqual(['test']);
  });

  it('gives no accuracy without a spot', () => {
    const result = opticsShoot.score(SETUP, { ...parts, run: { ...RUN, reading: { kind: 'none' } } });
    expect(result.details.slice(0, 2).map(({ display }) => display)).toEqual(['no spot', '0.00 of 50']);
  });

  it('names a part that no longer fits a changed set-up', () => {
    const faults = (setup: Partial<OpticsSetup>) => opticsShoot.score({ ...SETUP, ...setup }, parts).faults;
    expect(faults({})).toEqual([]);
    expect(faults({ barriersStanding: 1 })).toEqual([{ part: 'run', message: '1 barrier stands in the box: write a whole number from 0 to 1.' }]);
    expect(faults({ mirrorsAllowed: 2 })[0]).toMatchObject({ part: 'run' });
    expect(faults({ box: { width: '600', depth: '600' } })).toEqual([{ part: 'run', message: 'The back wall is 600 mm long.' }]);
    expect(faults({ testMax: '20' })[0]).toMatchObject({ part: 'test' });
    expect(opticsShoot.score({ ...SETUP, testMax: '20' }, parts)).toMatchObject({ complete: false, score: null });
  });

  it('orders as opticsRank does, by the set-up’s own tie-breaks', () => {
    const teams = (['200', '180', undefined] as const).map((timeUsedSeconds, i) => ({
      id: `T${i}`,
      status: 'scored' as const,
      parts: { run: { ...RUN, timeUsedSeconds }, test: { points: '25' } },
    }));
    expect(opticsShoot.rank(SETUP, teams).map(({ id, place }) => [id, place])).toEqual([['T1', 1], ['T0', 2], ['T2', 3]]);
    const samples = opticsShoot.sampleTeams(SETUP);
    const rows = opticsRank({
      rules: opticsRules(SETUP),
      teams: samples.map(({ id, parts: { run, test } }) => ({
        team: id,
        d: run?.reading.kind === 'distance' ? run.reading.mm : null,
        barriersUsed: run?.barriersUsed ?? 0,
        testRaw: test?.points ?? 0,
        mirrorsUsed: run?.mirrorsUsed ?? null,
        timeUsed: run?.timeUsedSeconds ?? null,
      })),
    }).rows;
    expect(opticsShoot.rank(SETUP, samples).map(({ id, place, display }) => [id, place, display])).toEqual(rows.map(({ team, place, display }) => [team, place, display]));
  });

  it('shows in the samples that the weights decide who wins', () => {
    const first = (weights: OpticsSetup['weights']) => {
      const setup = { ...SETUP, weights };
      return opticsShoot.rank(setup, opticsShoot.sampleTeams(setup))[0]?.id;
    };
    expect(first({ accuracy: 100, barriers: 0, test: 0 })).toBe('A');
    expect(first({ accuracy: 0, barriers: 100, test: 0 })).toBe('B');
    expect(first({ accuracy: 0, barriers: 0, test: 100 })).toBe('F');
  });
});

describe('the set-up', () => {
  const said = (change: object): Record<string, string> => {
    const result = checkValue(opticsSetupSchema, { ...opticsDefaults(), ...change });
    return result.ok ? {} : Object.fromEntries(result.fields.map(({ path, message }) => [path, message]));
  };

  it.each<[object, string, string]>([
    [{ weights: { accuracy: 50, barriers: 20, test: 29 } }, 'weights', 'The weights add up to 99: they must add up to 100.'],
    [{ weights: { accuracy: 50.5, barriers: 20, test: 29.5 } }, 'weights.accuracy', 'Write a whole number from 0 to 100.'],
    [{ weights: { accuracy: 101, barriers: 0, test: -1 } }, 'weights.test', 'Write a whole number from 0 to 100.'],
    [{ box: { width: '0', depth: '600' } }, 'box.width', 'The box must be more than 0 and at most 100,000 mm wide.'],
    [{ box: { width: '1000', depth: '600.25' } }, 'box.depth', 'Write the inside depth in millimetres with at most one decimal, such as 600.'],
    [{ targetX: '1000.1' }, 'targetX', 'The back wall is 1,000 mm long: the target can be 0 to 1,000 from the left corner.'],
    [{ targetX: '-1' }, 'targetX', 'The target can’t be left of the back wall: write 0 or more.'],
    [{ fullScale: '0' }, 'fullScale', 'The full scale must be more than 0 and at most 1,000,000 mm.'],
    [{ barriersStanding: 0 }, 'barriersStanding', 'Write how many barriers stand in the box: a whole number from 1 to 20.'],
    [{ barrierRule: '  ' }, 'barrierRule', 'Say what counts as a barrier used: the run desk shows it to whoever counts.'],
    [{ tieBreak: ['distance', 'test'] }, 'tieBreak', 'Put all five tie-breaks in order, each once.'],
    [{ tapes: { front: 'front', back: 'left', left: 'front', right: 'front' } }, 'tapes.front', 'Choose the end of the wall where the tape’s zero lies.'],
    [{ testGroups: [{ key: 'a', name: 'A', max: '20' }] }, 'testGroups', 'The groups’ points add up to 20, but the test is out of 30.'],
    [{ laser: { class: '5', note: '' } }, 'laser.class', 'Choose the class on the laser’s label.'],
    [{ mirrorsAllowed: '5' }, 'mirrorsAllowed', 'Write how many mirrors a team may use: a whole number from 0 to 20.'],
  ])('%j is refused beside %s', (change, path, message) => expect(said(change)).toMatchObject({ [path]: message }));

  it('finds what is unlikely, but keeps it', () => {
    const codes = (change: Partial<OpticsSetup>) => opticsFindings({ ...opticsDefaults(), barrierRule: 'Ours.', laser: { class: '2', note: '' }, ...change }).map(({ code }) => code);
    expect(codes({})).toEqual([]);
    expect(codes({ laser: { class: '3R', note: '' } })).toEqual(['laser-strong']);
    expect(codes({ laser: { class: 'not noted', note: '' } })).toEqual(['laser-class']);
    expect(codes({ barrierRule: opticsDefaults().barrierRule })).toEqual(['barrier-rule']);
    expect(codes({ fullScale: '1600.1' })).toEqual(['full-scale-long']);
    expect(codes({ fullScale: '1600' })).toEqual([]);
    expect(codes({ fullScale: '49.9' })).toEqual(['full-scale-short']);
    expect(codes({ targetX: '5' })).toEqual(['target-corner']);
    expect(codes({ targetX: '1000' })).toEqual(['target-corner']);
    expect(codes({ box: { width: '1000', depth: '60' } })).toEqual(['box-depth']);
    expect(codes({ weights: { accuracy: 70, barriers: 30, test: 0 } })).toEqual(['weight-test']);
    expect(codes({ mirrorsAllowed: 6 })).toEqual(['mirrors-allowed']);
  });

  it('tells the public how teams are scored, not what stands in the box', () => {
    const labels = opticsPublic(SETUP).map(({ label }) => label);
    expect(labels).toEqual(['Mirrors a team may use', 'Time', 'Weights', 'Full scale', 'Written test', 'Counts as a barrier used', 'Equal scores']);
    for (const hidden of ['Box', 'Target', 'Barriers standing', 'Laser']) {
      expect(opticsSummary(SETUP).map(({ label }) => label)).toContain(hidden);
      expect(labels).not.toContain(hidden);
    }
  });

  it('shows both ways round and which counts', () => {
    const lines = (reading: Reading) => Object.fromEntries(runWorkings(SETUP, { ...RUN, reading }).map(({ label, value }) => [label, value]));
    expect(lines({ kind: 'tape', wall: 'back', tape: '612.5' })).toMatchObject({
      Spot: 'back wall, tape 612.5 mm, from the left corner to the right',
      'Counter-clockwise': '112.5 mm',
      Clockwise: '3,087.5 mm',
      'Distance that counts': '112.5 mm',
      'Mirrors used': '3 of 5',
    });
    expect(lines({ kind: 'tape', wall: 'front', tape: '500' })['Distance that counts']).toBe('1,600 mm, the same both ways');
    expect(lines({ kind: 'distance', mm: '80' })).toMatchObject({ 'The other way round': '3,120 mm', 'Distance that counts': '80 mm' });
    expect(lines({ kind: 'none' })).toMatchObject({ Spot: 'no spot on any wall', 'Distance that counts': 'none' });
  });

  it('describes a run in a few words', () => {
    expect(describeRun(SETUP, RUN)).toBe('back wall, tape 612.5: 112.5 mm; 3 mirrors, 2 barriers used');
    expect(describeRun(SETUP, { ...RUN, reading: { kind: 'distance', mm: '1234.5' }, mirrorsUsed: 1 })).toBe('1,234.5 mm, measured directly; 1 mirror, 2 barriers used');
    expect(describeRun(SETUP, { reading: { kind: 'none' }, mirrorsUsed: 0, barriersUsed: 1, timeUsedSeconds: '240' })).toBe('no spot on any wall; 0 mirrors, 1 barrier used, 240 s');
  });
});
