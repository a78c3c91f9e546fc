import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DomainError } from '../domain-error';
import { compareExact, exact, fromRatioText, toShortText } from '../exact';
import { OPTICS_TIE_BREAKS, opticsRank, opticsScore, type OpticsRules, type OpticsTeam, type OpticsTieBreak } from './optics';

const RULES: OpticsRules = { wA: 50, wB: 20, wT: 30, R: '600', barriersAvailable: 4, testMax: '30' };
const TEAM: OpticsTeam = { team: 'T', d: '60', barriersUsed: 4, testRaw: '25', mirrorsUsed: 3, timeUsed: '200', status: 'scored' };

const tenths = (max: number) => fc.integer({ min: 0, max: max * 10 }).map((n) => toShortText(exact(n).div(10), 1));
const rules: fc.Arbitrary<OpticsRules> = fc
  .record({ wA: fc.integer({ min: 0, max: 100 }), rest: fc.nat(), R: fc.integer({ min: 1, max: 20_000 }), barriersAvailable: fc.integer({ min: 1, max: 9 }), testMax: fc.integer({ min: 1, max: 100 }) })
  .map(({ wA, rest, R, barriersAvailable, testMax }) => {
    const wB = rest % (101 - wA);
    return { wA, wB, wT: 100 - wA - wB, R: toShortText(exact(R).div(10), 1), barriersAvailable, testMax };
  });
const teamFor = (r: OpticsRules): fc.Arbitrary<Omit<OpticsTeam, 'team'>> =>
  fc.record({
    d: fc.option(tenths(2500), { freq: 6 }),
    barriersUsed: fc.integer({ min: 0, max: r.barriersAvailable }),
    testRaw: fc.integer({ min: 0, max: Number(r.testMax) * 2 }).map((n) => toShortText(exact(n).div(2), 1)),
    mirrorsUsed: fc.option(fc.integer({ min: 0, max: 5 })),
    timeUsed: fc.option(tenths(240)),
    status: fc.constantFrom('scored' as const, 'scored' as const, 'scored' as const, 'dns' as const, 'dq' as const),
  });
const field = rules.chain((r) =>
  fc.record({ rules: fc.constant(r), teams: fc.array(teamFor(r), { maxLength: 20 }).map((ts) => ts.map((t, i): OpticsTeam => ({ team: `T${i}`, ...t }))) }),
);

describe('opticsScore', () => {
  it('lies in 0 to 100, as its three shares lie in 0 to 1', () => {
    fc.assert(
      fc.property(rules.chain((r) => fc.tuple(fc.constant(r), teamFor(r))), ([r, t]) => {
        const out = opticsScore({ rules: r, team: { team: 'T', ...t } });
        for (const share of [out.accuracy, out.barrier, out.test]) {
          expect(fromRatioText(share).compare(0) >= 0 && fromRatioText(share).compare(1) <= 0).toBe(true);
        }
        const score = fromRatioText(out.score);
        expect(score.compare(0) >= 0 && score.compare(100) <= 0).toBe(true);
        expect(out.display).toMatch(/^\d{1,3}\.\d\d$/);
      }),
    );
  });

  it('never rises when the spot is farther off, and no spot is as far as full scale', () => {
    fc.assert(
      fc.property(rules.chain((r) => fc.tuple(fc.constant(r), teamFor(r))), tenths(2500), tenths(2500), ([r, t], a, b) => {
        const at = (d: string | null) => fromRatioText(opticsScore({ rules: r, team: { team: 'T', ...t, d } }).score);
        const [near, far] = exact(a).compare(exact(b)) <= 0 ? [a, b] : [b, a];
        expect(compareExact(at(near), at(far))).toBeGreaterThanOrEqual(0);
        expect(compareExact(at(null), at(String(r.R)))).toBe(0);
      }),
    );
  });

  it('agrees with whole-number arithmetic over one common denominator', () => {
    fc.assert(
      fc.property(rules.chain((r) => fc.tuple(fc.constant(r), teamFor(r))), ([r, t]) => {
        // d, R in tenths; test in halves.
        const R = BigInt(exact(r.R).mul(10).n);
        const d = t.d === null ? R : BigInt(exact(t.d).mul(10).n);
        const away = d > R ? R : d;
        const test = BigInt(exact(t.testRaw).mul(2).n);
        const max = BigInt(Number(r.testMax) * 2);
        const bars = BigInt(r.barriersAvailable);
        const denominator = R * bars * max;
        const numerator =
          BigInt(r.wA) * (R - away) * bars * max + BigInt(r.wB) * BigInt(t.barriersUsed) * R * max + BigInt(r.wT) * test * R * bars;
        const { score, display } = opticsScore({ rules: r, team: { team: 'T', ...t } });
        const [p = '', q = ''] = score.split('/');
        expect(BigInt(p) * denominator).toBe(BigInt(q) * numerator);
        const cents = (200n * numerator + denominator) / (2n * denominator);
        expect(BigInt(display.replace('.', ''))).toBe(cents);
      }),
    );
  });

  it.each<[string, Partial<OpticsRules>, Partial<Record<keyof OpticsTeam, unknown>>]>([
    ['bad-weights', { wA: 51 }, {}],
    ['bad-weights', { wA: -10, wB: 80 }, {}],
    ['bad-weights', { wA: 50.5, wB: 19.5 }, {}],
    ['bad-weights', { wA: '50' as unknown as number }, { d: '-1' }],
    ['bad-scale', { R: '0' }, { d: '-1' }],
    ['bad-scale', { R: '-600' }, {}],
    ['bad-scale', { R: 'far' }, {}],
    ['bad-test', { testMax: 0 }, { d: '-1' }],
    ['bad-barriers', { barriersAvailable: 0 }, { d: '-1' }],
    ['bad-barriers', { barriersAvailable: 1.5 }, {}],
    ['bad-distance', {}, { d: '-0.1', barriersUsed: 9 }],
    ['bad-distance', {}, { d: 12.5 }],
    ['bad-distance', {}, { d: undefined }],
    ['bad-barriers', {}, { barriersUsed: 5, testRaw: '99' }],
    ['bad-barriers', {}, { barriersUsed: -1 }],
    ['bad-barriers', {}, { barriersUsed: 1.5 }],
    ['bad-test', {}, { testRaw: '30.5' }],
    ['bad-test', {}, { testRaw: '-0.5' }],
    ['bad-test', {}, { testRaw: '12.25' }],
    ['bad-test', {}, { testRaw: null }],
  ])('reports the first thing that is wrong: %s', (code, r, t) => {
    const input = { rules: { ...RULES, ...r }, team: { ...TEAM, ...t } as OpticsTeam };
    expect(() => opticsScore(input)).toThrow(expect.objectContaining({ code }) as DomainError);
    expect(() => opticsRank({ rules: input.rules, teams: [TEAM, input.team] })).toThrow(expect.objectContaining({ code }) as DomainError);
  });
});

describe('opticsRank', () => {
  const rank = (teams: Partial<OpticsTeam>[], options: Parameters<typeof opticsRank>[1] = {}) =>
    opticsRank({ rules: RULES, teams: teams.map((t, i) => ({ ...TEAM, team: String.fromCharCode(65 + i), ...t })) }, options).rows;
  const order = (...args: Parameters<typeof rank>) => rank(...args).map(({ team, place }) => `${team}${place ?? ''}`).join(' ');

  it('gives each team the same place in whatever order the teams come', () => {
    fc.assert(
      fc.property(field.chain((f) => fc.tuple(fc.constant(f), fc.shuffledSubarray(f.teams, { minLength: f.teams.length }))), ([f, shuffled]) => {
        const places = (teams: OpticsTeam[]) =>
          Object.fromEntries(opticsRank({ rules: f.rules, teams }).rows.map(({ team, place, points, score }) => [team, { place, points, score }]));
        expect(places(shuffled)).toEqual(places(f.teams));
      }),
    );
  });

  it('places each team after exactly those that are better, and gives N + 1 and N + 2 to those not scored', () => {
    fc.assert(
      fc.property(field, (f) => {
        const { rows } = opticsRank(f);
        const scored = rows.filter((row) => row.status === 'scored');
        expect(rows).toHaveLength(f.teams.length);
        expect(rows.map((row) => row.status)).toEqual([...rows.map((row) => row.status)].sort((a, b) => 'scored dns dq'.indexOf(a) - 'scored dns dq'.indexOf(b)));
        scored.forEach((row, i) => {
          expect(row.points).toBe(row.place);
          const before = scored[i - 1];
          expect(row.place === i + 1 || row.place === before?.place).toBe(true);
          if (before) expect(fromRatioText(before.score ?? '').compare(fromRatioText(row.score ?? ''))).toBeGreaterThanOrEqual(0);
        });
        for (const row of rows.filter(({ status }) => status !== 'scored')) {
          expect(row).toMatchObject({ place: null, score: null, display: null, points: f.teams.length + (row.status === 'dns' ? 1 : 2) });
        }
        // Place points of the scored teams add up to at most 1 + 2 + … + n, exactly that without shared places.
        const n = scored.length;
        const sum = scored.reduce((total, { points }) => total + points, 0);
        expect(sum).toBeLessThanOrEqual((n * (n + 1)) / 2);
        if (new Set(scored.map(({ place }) => place)).size === n) expect(sum).toBe((n * (n + 1)) / 2);
      }),
    );
  });

  it('settles ties by distance, barriers, test, mirrors, time, in that order', () => {
    // 60 mm with 3 barriers and 30 points is as much as 60 mm with 4 barriers and 25.
    expect(order([{ barriersUsed: 3, testRaw: '30' }, {}])).toBe('B1 A2');
    expect(order([{ mirrorsUsed: 3 }, { mirrorsUsed: 2 }])).toBe('B1 A2');
    expect(order([{ timeUsed: '200' }, { timeUsed: '199.9' }])).toBe('B1 A2');
    expect(order([{}, {}, { timeUsed: 1 }, {}])).toBe('C1 A2 B2 D2');
  });

  it('puts no spot after every distance, and what was not kept after what was', () => {
    expect(order([{ d: null }, { d: '9000' }, { d: '600' }])).toBe('C1 B2 A3');
    expect(order([{ timeUsed: null }, { timeUsed: '240' }, {}])).toBe('C1 B2 A3');
    expect(order([{ mirrorsUsed: undefined }, { mirrorsUsed: 5 }])).toBe('B1 A2');
    expect(order([{ timeUsed: null }, { timeUsed: undefined }])).toBe('A1 B1');
  });

  it('takes another order of tie-breaks', () => {
    const teams = [{ barriersUsed: 3, testRaw: '30', timeUsed: '100' }, { timeUsed: '150' }];
    const swapped: OpticsTieBreak[] = ['timeUsed', 'test', 'mirrorsUsed', 'barriersUsed', 'distance'];
    expect(order(teams)).toBe('B1 A2');
    expect(order(teams, { tieBreak: swapped })).toBe('A1 B2');
    expect(order([{ timeUsed: 1 }, { timeUsed: 2 }], { tieBreak: ['distance'] })).toBe('A1 B1');
    expect(() => rank(teams, { tieBreak: ['test', 'test'] })).toThrow(expect.objectContaining({ code: 'bad-tie-break' }) as DomainError);
    expect(() => rank(teams, { tieBreak: ['luck' as OpticsTieBreak] })).toThrow(DomainError);
  });

  it('keeps the score in front of any tie-break', () => {
    fc.assert(
      fc.property(field, fc.shuffledSubarray([...OPTICS_TIE_BREAKS], { minLength: 5 }), (f, tieBreak) => {
        const scores = (rows: { score: string | null }[]) => rows.map((row) => row.score);
        expect(scores(opticsRank(f, { tieBreak }).rows)).toEqual(scores(opticsRank(f).rows));
      }),
    );
  });

  it('does not read the results of teams that did not start or were disqualified', () => {
    const rows = rank([{ status: 'dq', d: 'lost', barriersUsed: 99 }, {}, { status: 'dns', testRaw: '-1' }]);
    expect(rows.map(({ team, points }) => [team, points])).toEqual([['B', 1], ['C', 4], ['A', 5]]);
    expect(rank([{ status: 'dns' }], { fieldSize: 24 })[0]?.points).toBe(25);
    expect(() => rank([{ status: 'late' as 'dns' }])).toThrow(expect.objectContaining({ code: 'bad-status' }) as DomainError);
  });

  it('is empty for no teams, but checks the rules all the same', () => {
    expect(rank([])).toEqual([]);
    expect(() => opticsRank({ rules: { ...RULES, wA: 0 }, teams: [] })).toThrow(expect.objectContaining({ code: 'bad-weights' }) as DomainError);
  });
});
