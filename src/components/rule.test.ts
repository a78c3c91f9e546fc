import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { rulePercent, ruleSvg, ruleTicks, stripSvg } from './rule';

describe('ruleTicks', () => {
  it('puts an hour at every long tick of a day from eight to three', () => {
    const ticks = ruleTicks({ min: 480, max: 900, major: 60, minor: 5 });
    expect(ticks).toHaveLength(85);
    expect(ticks.filter((tick) => tick.kind === 'major').map((tick) => tick.at)).toEqual([480, 540, 600, 660, 720, 780, 840, 900]);
    expect(ticks.filter((tick) => tick.kind === 'half').map((tick) => tick.at)).toEqual([510, 570, 630, 690, 750, 810, 870]);
  });

  it('counts places from the first, not from nought', () => {
    const majors = ruleTicks({ min: 1, max: 30, major: 10, minor: 1 }).filter((tick) => tick.kind === 'major');
    expect(majors.map((tick) => tick.at)).toEqual([1, 11, 21]);
  });

  it('does not drift with fractions, and ends within the rule', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 200 }), fc.constantFrom(0.1, 0.2, 0.5, 1, 5), (n, minor) => {
        const ticks = ruleTicks({ min: 0, max: n * minor, major: minor * 10, minor });
        expect(ticks).toHaveLength(n + 1);
        expect(ticks.filter((tick) => tick.kind === 'major')).toHaveLength(Math.floor(n / 10) + 1);
        for (const tick of ticks) expect(tick.at).toBeLessThanOrEqual(n * minor + 1e-6);
      }),
    );
  });

  it('refuses a rule without length', () => {
    expect(() => ruleTicks({ min: 5, max: 5, major: 1, minor: 1 })).toThrow(RangeError);
    expect(() => ruleTicks({ min: 0, max: 5, major: 1, minor: 0 })).toThrow(RangeError);
  });
});

describe('ruleSvg', () => {
  it('places by attributes, never by style, and escapes its words', () => {
    const { html } = ruleSvg({
      min: 0,
      max: 100,
      major: 50,
      minor: 10,
      blocks: [{ from: 0, to: 25, label: '<b>Check-in</b>', state: 'done' }],
      marks: [{ at: 87, label: '87 mm', tone: 'beam' }],
      now: { at: 50, label: '11:32' },
    });
    expect(html).not.toContain('style=');
    expect(html).toContain('&lt;b&gt;Check-in');
    expect(html).toContain('x="87%"');
    expect(html).toContain('x="50%"');
  });

  it('keeps what lies outside at its end', () => {
    expect(rulePercent(-5, 0, 10)).toBe(0);
    expect(rulePercent(15, 0, 10)).toBe(100);
  });
});

describe('stripSvg', () => {
  it('stacks points that meet and says them in words', () => {
    const { html } = stripSvg([{ at: 1, tone: 'brass' }, { at: 1 }, { at: 30 }], { min: 1, max: 30, label: 'Places 1, 1, 30' });
    expect(html.match(/<circle/g)).toHaveLength(3);
    expect(html).toContain('cx="0%" cy="31"');
    expect(html).toContain('cx="0%" cy="24"');
    expect(html).toContain('aria-label="Places 1, 1, 30"');
  });
});
