import { markup, type Markup } from './markup';

/**
 * The rule: a millimetre scale as the axis of whatever is measured: a day, a run, a field of results.
 * Everything is placed by percentages in SVG attributes, so it fits any width without script or inline style.
 */
export type RuleTone = 'ink' | 'spruce' | 'beam' | 'brass' | 'slate';

export interface RuleSpec {
  min: number;
  max: number;
  /** Distance of the long, labelled ticks, counted from `min`. */
  major: number;
  /** Distance of the short ticks. */
  minor: number;
  /** Words for a value; the number itself when left out. */
  label?: ((value: number) => string) | undefined;
  /** Labels to print instead of one at every long tick. */
  labels?: readonly { at: number; text: string }[] | undefined;
  /** Stretches under the rule. */
  blocks?: readonly RuleBlock[] | undefined;
  /** Moments under the rule, each with a word and what stands below it. */
  flags?: readonly { at: number; label: string; detail?: string | undefined }[] | undefined;
  /** Readings on the rule. */
  marks?: readonly { at: number; label?: string | undefined; tone?: RuleTone | undefined }[] | undefined;
  /** The present moment. */
  now?: { at: number; label: string } | undefined;
}

export interface RuleBlock {
  from: number;
  to: number;
  label: string;
  detail?: string | undefined;
  state?: 'plain' | 'done' | 'live' | undefined;
}

export interface RuleTick {
  at: number;
  kind: 'major' | 'half' | 'minor';
}

const AXIS = 20;
const TICK = { major: 14, half: 10, minor: 6 };

/** The ticks from `min` to `max`, both included where they fall on one. Counted, not summed, so that none drifts. */
export function ruleTicks(spec: Pick<RuleSpec, 'min' | 'max' | 'major' | 'minor'>): RuleTick[] {
  const { min, max, major, minor } = spec;
  if (!(max > min) || !(major > 0) || !(minor > 0)) throw new RangeError('A rule needs max > min and ticks apart.');
  const count = Math.floor((max - min) / minor + 1e-9);
  const whole = (value: number) => Math.abs(value - Math.round(value)) < 1e-6;
  return Array.from({ length: count + 1 }, (_, i) => {
    const part = (i * minor) / major;
    return { at: min + i * minor, kind: whole(part) ? 'major' : whole(part * 2) ? 'half' : 'minor' };
  });
}

/** A place on the rule as a percentage of its length, kept within it. */
export function rulePercent(at: number, min: number, max: number): number {
  const share = ((Math.min(max, Math.max(min, at)) - min) / (max - min)) * 100;
  return Math.round(share * 100) / 100;
}

/** The rule as SVG. It is a drawing only: say the same in words beside it. */
export function ruleSvg(spec: RuleSpec): Markup {
  const { min, max, blocks = [], flags = [], marks = [], now } = spec;
  const x = (at: number) => `${rulePercent(at, min, max)}%`;
  const words = spec.label ?? String;
  const ticks = ruleTicks(spec);
  const labels =
    spec.labels ?? ticks.filter((tick) => tick.kind === 'major').map((tick) => ({ at: tick.at, text: words(tick.at) }));
  const anchor = (at: number) => {
    const share = rulePercent(at, min, max);
    return share < 1.5 ? 'start' : share > 98.5 ? 'end' : 'middle';
  };
  // A label the present moment stands upon gives way to it; on a narrow rule, so does its neighbour.
  const beside = (at: number) => {
    const away = now ? Math.abs(rulePercent(at, min, max) - rulePercent(now.at, min, max)) : 100;
    return away < 5 ? ' under' : away < 14 ? ' near' : '';
  };
  const labelled = marks.some((mark) => mark.label);
  const height = flags.length > 0 ? 84 : blocks.length > 0 ? 78 : labelled ? 62 : 36;

  return markup`<svg height="${height}" class="${flags.length > 0 ? 'mm-flags' : ''}" aria-hidden="true" focusable="false">${labels.map(
    (label, i) =>
      markup`<text class="mm-label${i % 2 === 1 ? ' odd' : ''}${beside(label.at)}" x="${x(label.at)}" y="12" text-anchor="${anchor(label.at)}">${label.text}</text>`,
  )}<g shape-rendering="crispEdges"><line class="mm-line" x1="0" x2="100%" y1="${AXIS}" y2="${AXIS}"/>${ticks.map(
    (tick) =>
      markup`<line class="mm-${tick.kind}" x1="${x(tick.at)}" x2="${x(tick.at)}" y1="${AXIS}" y2="${AXIS + TICK[tick.kind]}"/>`,
  )}</g>${blocks.map((block) => {
    const width = Math.round((rulePercent(block.to, min, max) - rulePercent(block.from, min, max)) * 100) / 100;
    const state = block.state === undefined || block.state === 'plain' ? '' : ` ${block.state}`;
    return markup`<svg class="mm-block${state}" x="${x(block.from)}" y="42" width="${width}%" height="34" overflow="hidden"><rect x="0" y="0" width="100%" height="34" rx="2"/><text x="9" y="22">${block.label}</text></svg>`;
  })}${flags.map(
    (flag) =>
      markup`<g class="mm-flag"><rect x="${x(flag.at)}" y="42" width="1" height="40"/><text x="${x(flag.at)}" dx="9" y="57">${flag.label}</text><text x="${x(flag.at)}" dx="9" y="78">${flag.detail ?? ''}</text></g>`,
  )}${marks.map(
    (mark) =>
      markup`<g class="tone-${mark.tone ?? 'ink'}"><line class="mm-mark" x1="${x(mark.at)}" x2="${x(mark.at)}" y1="${AXIS - 4}" y2="${AXIS + 22}"/>${
        mark.label &&
        markup`<text class="mm-mark-label" x="${x(mark.at)}" y="58" text-anchor="${anchor(mark.at)}">${mark.label}</text>`
      }</g>`,
  )}${
    now &&
    markup`<g class="tone-beam"><line class="mm-mark" x1="${x(now.at)}" x2="${x(now.at)}" y1="14" y2="${height}"/><svg x="${x(now.at)}" y="0" overflow="visible"><rect class="mm-now-ground" x="${-(now.label.length * 3.6 + 5)}" y="0" width="${now.label.length * 7.2 + 10}" height="16"/></svg><text class="mm-mark-label" x="${x(now.at)}" y="12" text-anchor="middle">${now.label}</text></g>`
  }</svg>`;
}

export interface StripPoint {
  at: number;
  tone?: 'plain' | 'brass' | 'beam' | undefined;
}

/**
 * Points along a rule of the same `min` and `max`, stacked where they meet. `label` says them in words.
 * Drawn 36 high; more than five at one place press closer together.
 */
export function stripSvg(points: readonly StripPoint[], spec: { min: number; max: number; label: string }): Markup {
  const places = new Map<number, StripPoint[]>();
  for (const point of points) places.set(point.at, [...(places.get(point.at) ?? []), point]);
  const circles = [...places].flatMap(([at, stack]) => {
    const step = stack.length > 5 ? 28 / (stack.length - 1) : 7;
    return stack.map(
      (point, i) =>
        markup`<circle cx="${rulePercent(at, spec.min, spec.max)}%" cy="${Math.round((31 - i * step) * 10) / 10}" r="3" class="${point.tone ?? 'plain'}"/>`,
    );
  });
  return markup`<svg class="strip" height="36" role="img" aria-label="${spec.label}"><line x1="0" x2="100%" y1="35.5" y2="35.5"/>${circles}</svg>`;
}
