/** Puts together what the queries give: the field of an event. Pure. */
import { toRatioText } from '~/domain/exact';
import type { AnyEventModule, EventTeam } from '~/event-modules/contract';
import { readStatus, STATUS_PART } from '~/event-modules/status-part';
import type { TeamRow } from '../entries/types';
import type { Field, FieldRow, KeptParts, MissingFinding, SettlementRow } from './types';

/** 'S09': the division's letter and the team's number. */
export function teamLabel(letter: string, number: number): string {
  return `${letter}${String(number).padStart(2, '0')}`;
}

/** Everything kept of a tournament, or of one event: event → team → part. */
export type KeptByTeam = ReadonlyMap<string, KeptParts>;

function joined(words: string[]): string {
  return words.length < 2 ? (words[0] ?? '') : `${words.slice(0, -1).join(', ')} and ${words.at(-1)}`;
}

/**
 * The field of one event: every confirmed team of the division with what was kept of it, put through the module.
 * What is missing, or no longer fits a set-up that was changed, is a finding; a settled one takes effect here.
 *
 * @param setup has passed the module's schema
 */
export function assembleField(
  module: AnyEventModule,
  setup: unknown,
  letter: string,
  teams: readonly TeamRow[],
  kept: KeptByTeam,
  settlements: readonly SettlementRow[],
): Field {
  const names = new Map(module.parts.map((p) => [p.key, p.name.toLowerCase()]));
  const rows = teams.map((team): FieldRow => {
    const mine = kept.get(team.id) ?? {};
    const status = readStatus(mine[STATUS_PART]?.value);
    const parts: Record<string, unknown> = {};
    for (const part of module.parts) if (mine[part.key]) parts[part.key] = mine[part.key]!.value;
    const score = module.score(setup, parts);
    const lacking = status.status === 'scored' ? [...score.missing, ...score.faults.map((f) => f.part)] : [];
    let finding: MissingFinding | null = null;
    let effective = status.status;
    const counted = { ...parts };
    if (lacking.length > 0) {
      const fingerprint = `${team.id}:${lacking.map((key) => `${key}@${mine[key]?.version ?? 0}`).sort().join(',')}`;
      const settlement = settlements.find((s) => s.kind === 'missing' && s.fingerprint === fingerprint) ?? null;
      const all = score.missing.length === module.parts.length;
      const missing = score.missing.map((key) => names.get(key) ?? key);
      const words = [
        ...(all ? ['Nothing is kept.'] : missing.length > 0 ? [`The ${joined(missing)} ${missing.length === 1 ? 'is' : 'are'} missing.`] : []),
        ...score.faults.map((f) => `The ${names.get(f.part) ?? f.part} no longer fits: ${f.message}`),
      ].join(' ');
      finding = { kind: 'missing', teamId: team.id, fingerprint, words, settlement };
      if (settlement?.outcome === 'did-not-start') effective = 'dns';
      if (settlement?.outcome === 'counts-as-nothing') {
        for (const part of module.parts) if (lacking.includes(part.key)) counted[part.key] = part.nothing(setup);
      }
    }
    return {
      teamId: team.id,
      number: team.number,
      label: teamLabel(letter, team.number),
      name: team.name,
      schoolId: team.schoolId,
      schoolName: team.schoolName,
      status: effective,
      statusNote: status.note,
      kept: mine,
      missing: finding && !finding.settlement ? lacking : [],
      finding,
      counted,
      complete: false,
      place: null,
      points: null,
      exact: null,
      display: null,
    };
  });
  const byId = new Map(rows.map((r) => [r.teamId, r]));
  const ranked = module.rank(
    setup,
    rows.map((r): EventTeam<Record<string, unknown>> => ({ id: r.teamId, status: r.status, parts: r.counted })),
  );
  const inOrder = ranked.map((row) => {
    const mine = byId.get(row.id)!;
    mine.complete = row.complete;
    mine.place = row.place;
    mine.points = row.points;
    mine.exact = row.score === null ? null : toRatioText(row.score);
    mine.display = row.display;
    return mine;
  });
  const takingPart = rows.filter((r) => r.status === 'scored');
  const findings = rows.flatMap((r) => (r.finding ? [r.finding] : []));
  return {
    rows,
    ranked: inOrder,
    complete: rows.filter((r) => r.complete).length,
    kept: takingPart.reduce((n, r) => n + module.parts.filter((p) => r.kept[p.key]).length, 0),
    expected: takingPart.length * module.parts.length,
    open: findings.filter((f) => !f.settlement),
    settled: findings.filter((f) => f.settlement),
  };
}

/** The school's name where the team's own does not say it: 'Wrenfield Academy 2' needs none. */
export function schoolBeside(team: { name: string; schoolName: string }): string | null {
  return team.name.toLowerCase().startsWith(team.schoolName.toLowerCase()) ? null : team.schoolName;
}
