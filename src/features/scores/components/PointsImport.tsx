import { useMemo, useState } from 'react';
import { callApi, type ApiProblem } from '~/client/api';
import { Button } from '~/components/react/Button';
import { ErrorSummary } from '~/components/react/ErrorSummary';
import { FileDrop } from '~/components/react/FileDrop';
import { Notice } from '~/components/react/Notice';
import { Tag } from '~/components/react/Tag';
import type * as CsvReader from '~/domain/csv-reader';
import { getEventModule } from '~/event-modules/registry';
import type { EntryState, EntryTeam } from '../types';

export interface PointsImportProps {
  initial: EntryState;
  endpoint: string;
  base: string;
}

const PART = 'test';
const MOST_BYTES = 1_000_000;

/** A row of the file, read against the field. */
interface ReadRow {
  row: number;
  team: EntryTeam | null;
  label: string;
  state: 'new' | 'change' | 'same' | 'empty' | 'wrong';
  words: string;
  before: string | null;
  problems: { column: string | null; message: string }[];
  value: unknown;
}

const STATE_WORDS = { new: 'new', change: 'changes', same: 'as kept', empty: 'blank, passed over', wrong: 'needs a look' } as const;
const TONES = { new: 'ok', change: 'wait', same: 'plain', empty: 'plain', wrong: 'bad' } as const;

/** The team that a cell names: 'S09', 's9' or '9'. */
function findTeam(teams: readonly EntryTeam[], cell: string): EntryTeam | null {
  const text = cell.trim().toUpperCase();
  const number = /^[A-Z]?\s*0*(\d{1,3})$/.exec(text)?.[1];
  if (number === undefined) return null;
  const letter = /^[A-Z]/.exec(text)?.[0];
  return teams.find((t) => t.number === Number(number) && (letter === undefined || t.label.startsWith(letter))) ?? null;
}

/** The reader of CSV files, fetched once somebody has a file. */
type Reader = typeof CsvReader;

function readFile(state: EntryState, text: string, { readCsv }: Reader): { table: CsvReader.CsvTable; rows: ReadRow[] } {
  const module = getEventModule(state.event.moduleKey);
  const part = module.parts.find((p) => p.key === PART)!;
  const csv = part.csv!;
  const fields = csv.fields(state.setup);
  const table = readCsv(
    text,
    [
      { key: 'team', header: 'Team number', aliases: ['Team no', 'Number', 'No'], required: true },
      { key: 'name', header: 'Team', aliases: ['Team name'] },
      { key: 'school', header: 'School' },
      ...fields.map((f, i) => ({ key: f.key, header: f.header, aliases: i === 0 ? ['Points', 'Test', 'Score'] : [], required: i === 0 && fields.length === 1 })),
    ],
    { maxRows: 2_000 },
  );
  const seen = new Map<string, number>();
  const rows = table.rows.map(({ row, cells }): ReadRow => {
    const team = findTeam(state.teams, cells['team'] ?? '');
    const base = { row, team, label: cells['team'] ?? '', words: '', before: null, problems: [], value: null };
    const wrong = (column: string | null, message: string): ReadRow => ({ ...base, state: 'wrong', problems: [{ column, message }] });
    if (!team) {
      return wrong(table.letters['team'] ?? null, cells['team'] === '' ? 'The team’s number is missing.' : `There is no team ${cells['team']} in this division.`);
    }
    const named = cells['name'] ?? '';
    if (named !== '' && named.trim().toLowerCase() !== team.name.trim().toLowerCase()) {
      return wrong(table.letters['name'] ?? null, `${team.label} is ${team.name}, but this row says ${named}.`);
    }
    const earlier = seen.get(team.id);
    if (earlier !== undefined) return wrong(table.letters['team'] ?? null, `${team.label} stands in row ${earlier} already.`);
    seen.set(team.id, row);
    if (fields.every((f) => (cells[f.key] ?? '') === '')) return { ...base, state: 'empty' };
    const parsed = csv.parseCsvRow(state.setup, cells);
    if (!parsed.ok) return { ...base, state: 'wrong', problems: parsed.fields.map((f) => ({ column: table.letters[f.path] ?? null, message: f.message })) };
    const kept = team.kept[PART];
    const words = part.describe(state.setup, parsed.value);
    const before = kept ? part.describe(state.setup, kept.value) : null;
    const same = kept !== undefined && JSON.stringify(csv.toCsvCells(state.setup, kept.value)) === JSON.stringify(csv.toCsvCells(state.setup, parsed.value));
    return { ...base, state: same ? 'same' : kept ? 'change' : 'new', words, before: same ? null : before, value: parsed.value };
  });
  return { table, rows };
}

/** A file is read here, shown row by row, and kept whole or not at all. */
export default function PointsImport({ initial, endpoint, base }: PointsImportProps) {
  const [state, setState] = useState(initial);
  const [file, setFile] = useState<{ name: string; text: string; reader: Reader } | null>(null);
  const [fault, setFault] = useState('');
  const [busy, setBusy] = useState(false);
  const [kept, setKept] = useState<number | null>(null);
  const [refused, setRefused] = useState<{ words: string[]; count: number }>({ words: [], count: 0 });
  const read = useMemo(() => (file ? readFile(state, file.text, file.reader) : null), [file, state]);
  const wrong = read ? read.rows.filter((r) => r.state === 'wrong') : [];
  const problems = read?.table.problems ?? [];
  const toKeep = read ? read.rows.filter((r) => r.state === 'new' || r.state === 'change') : [];
  const untouched = read ? state.teams.filter((t) => !t.kept[PART] && !toKeep.some((r) => r.team?.id === t.id)).length : 0;

  async function take(chosen: File): Promise<void> {
    setKept(null);
    setRefused({ words: [], count: 0 });
    if (chosen.size > MOST_BYTES) {
      setFile(null);
      setFault('This file is larger than 1 MB, so it is not a list of points.');
      return;
    }
    setFault('');
    try {
      const reader = await import('~/domain/csv-reader');
      setFile({ name: chosen.name, text: reader.decodeCsv(new Uint8Array(await chosen.arrayBuffer())), reader });
    } catch {
      setFile(null);
      setFault('The file could not be read just now. Choose it again.');
      return;
    }
    try {
      setState(await callApi<EntryState>('GET', endpoint));
    } catch {
      // The field as it was loaded will do: keeping checks every row against what stands then.
    }
  }

  async function keep(): Promise<void> {
    setBusy(true);
    try {
      const answer = await callApi<{ kept: number }>('POST', `${endpoint}/import`, {
        part: PART,
        setupVersion: state.setupVersion,
        device: crypto.randomUUID(),
        rows: toKeep.map((r, i) => ({ teamId: r.team!.id, value: r.value, baseVersion: r.team!.kept[PART]?.version ?? 0, key: crypto.randomUUID(), sequence: i + 1 })),
      });
      setKept(answer.kept);
      setFile(null);
      setState(await callApi<EntryState>('GET', endpoint).catch(() => state));
    } catch (error) {
      const problem = error as ApiProblem;
      const rows = problem.fields.map((f) => {
        const at = toKeep[Number(/^rows\.(\d+)/.exec(f.path)?.[1] ?? -1)];
        return at ? `Row ${at.row}, ${at.team!.label}: ${f.message}` : f.message;
      });
      setRefused((r) => ({ words: [problem.detail, ...rows.filter((w) => w !== problem.detail)], count: r.count + 1 }));
    } finally {
      setBusy(false);
    }
  }

  return (
    <div className="stack max-w-[60rem]">
      {kept !== null && (
        <Notice tone="ok" title={`Points of ${kept === 1 ? 'one team' : `${kept} teams`} are kept.`}>
          <a href={base}>See where the event stands</a>
        </Notice>
      )}
      <ErrorSummary errors={refused.words.map((message) => ({ message }))} focusKey={refused.count} />
      <ol className="lines">
        <li>
          <a href={`${endpoint}/template.csv?part=${PART}`} download>
            Download the file with your teams in it
          </a>{' '}
          <span className="muted">and write the points beside them, in any spreadsheet.</span>
        </li>
        <li>Save it as CSV and choose it here. Nothing is kept until you have looked at it.</li>
      </ol>
      <FileDrop label="File with points" accept=".csv,text/csv" hint="CSV, up to 1 MB. Columns may be in any order; rows without points are passed over." error={fault || undefined} fileName={file?.name} onFile={(f) => void take(f)} />
      {read && problems.length > 0 && (
        <Notice tone="bad" title="The file can’t be kept as it is.">
          <ul>
            {problems.map((p) => (
              <li key={`${p.row}${p.column}${p.code}`}>
                {p.column ? `Cell ${p.column}${p.row}: ` : p.row > 1 ? `Row ${p.row}: ` : ''}
                {p.message}
              </li>
            ))}
          </ul>
        </Notice>
      )}
      {read && read.rows.length > 0 && (
        <section className="stack" aria-labelledby="preview">
          <h2 id="preview">
            {wrong.length > 0
              ? `${wrong.length === 1 ? 'One row needs' : `${wrong.length} rows need`} a look before anything is kept`
              : toKeep.length === 0
                ? 'Nothing new in this file'
                : `${toKeep.length === 1 ? 'One team' : `${toKeep.length} teams`} will be kept`}
          </h2>
          <p className="muted">
            {read.rows.filter((r) => r.state === 'new').length} new, {read.rows.filter((r) => r.state === 'change').length} changed, {read.rows.filter((r) => r.state === 'same').length} as kept
            {untouched > 0 && `; ${untouched === 1 ? 'one team has' : `${untouched} teams have`} no points after this`}.
            {read.table.ignored.length > 0 && ` Columns passed over: ${read.table.ignored.join(', ')}.`}
          </p>
          <div className="table-scroll" role="region" aria-label="Rows of the file" tabIndex={0}>
            <table className="table">
              <caption className="sr-only">Rows of the file</caption>
              <thead>
                <tr>
                  <th className="n" scope="col">
                    Row
                  </th>
                  <th scope="col">Team</th>
                  <th scope="col">Points</th>
                  <th scope="col">State</th>
                </tr>
              </thead>
              <tbody>
                {[...read.rows].sort((a, b) => Number(b.state === 'wrong') - Number(a.state === 'wrong') || a.row - b.row).map((r) => (
                  <tr key={r.row}>
                    <td className="n">{r.row}</td>
                    <th scope="row">{r.team ? `${r.team.label} ${r.team.name}` : r.label || 'no number'}</th>
                    <td>
                      {r.words}
                      {r.before && <span className="muted"> (kept: {r.before})</span>}
                      {r.problems.map((p) => (
                        <p key={p.message} className="field-error">
                          {p.column ? `Cell ${p.column}${r.row}: ` : ''}
                          {p.message}
                        </p>
                      ))}
                    </td>
                    <td>
                      <Tag tone={TONES[r.state]}>{STATE_WORDS[r.state]}</Tag>
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
          {wrong.length === 0 && problems.length === 0 && toKeep.length > 0 && (
            <div className="cluster">
              <Button tone="primary" size="big" busy={busy ? 'Keeping…' : false} onPress={() => void keep()}>
                Keep the points of {toKeep.length === 1 ? 'one team' : `${toKeep.length} teams`}
              </Button>
              <Button onPress={() => setFile(null)}>Leave it</Button>
            </div>
          )}
          {(wrong.length > 0 || problems.length > 0) && <p className="muted">Put the file right in the spreadsheet, save it, and choose it again.</p>}
        </section>
      )}
    </div>
  );
}
