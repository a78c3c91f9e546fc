import { QueryClientProvider, useQuery, useQueryClient } from '@tanstack/react-query';
import { Fragment, useEffect, useMemo, useRef, useState, type ComponentType } from 'react';
import { callApi } from '~/client/api';
import { Outbox, type OutboxItem } from '~/client/outbox';
import { queryClient } from '~/client/query';
import { Button } from '~/components/react/Button';
import { ChoiceGroup } from '~/components/react/ChoiceGroup';
import { ErrorSummary } from '~/components/react/ErrorSummary';
import { Notice } from '~/components/react/Notice';
import { keptAt, Status } from '~/components/react/Status';
import { TextField } from '~/components/react/TextField';
import { checkValue, type Checked } from '~/domain/fields';
import type { AnyEventModule } from '~/event-modules/contract';
import { ENTRY_FORMS, type EntryFormProps } from '~/event-modules/entry-forms';
import { getEventModule, type EventModuleKey } from '~/event-modules/registry';
import { readStatus, STATUS_PART, STATUS_WORDS, statusSchema, type StatusValue } from '~/event-modules/status-part';
import type { EntryState, EntryTeam, KeptAnswer, KeptPart } from '../types';

export interface EntryFormHostProps {
  initial: EntryState;
  /** Where readings are asked for and kept. */
  endpoint: string;
  liveUrl: string;
  /** The event's page, and a team's history under it. */
  base: string;
  person: { id: string; name: string };
  zone: string;
}

type Forms = Record<string, ComponentType<EntryFormProps>>;

/** What two people typed for the same thing. */
interface Disagreement {
  mine: unknown;
  theirs: { version: number; value: unknown; keptAt: string; keptBy: string };
}

/** A team's value in words, for comparing. */
function describe(module: AnyEventModule, setup: unknown, part: string, value: unknown): string {
  if (part === STATUS_PART) {
    const { status, note } = readStatus(value);
    return `${STATUS_WORDS[status]}${note ? `: ${note}` : ''}`;
  }
  const found = module.parts.find((p) => p.key === part);
  if (!found) return '';
  const checked = checkValue<unknown>(found.schema(setup), value);
  return checked.ok ? found.describe(setup, checked.value) : 'does not fit the set-up any more';
}

function workings(module: AnyEventModule, setup: unknown, part: string, value: unknown): { label: string; value: string }[] {
  const found = module.parts.find((p) => p.key === part);
  if (!found) return [{ label: 'Team', value: describe(module, setup, part, value) }];
  const checked = checkValue<unknown>(found.schema(setup), value);
  return checked.ok ? found.workings(setup, checked.value) : [{ label: found.name, value: checked.fields[0]?.message ?? 'does not fit' }];
}

/** Whether a team takes part. */
function StatusForm({ draft, onChange, errors, isDisabled }: EntryFormProps) {
  const typed = (draft ?? {}) as Partial<StatusValue>;
  return (
    <div className="stack">
      <ChoiceGroup
        id="status"
        label="Does the team take part?"
        columns={3}
        value={typed.status ?? null}
        error={errors['status']}
        isDisabled={isDisabled}
        options={[
          { value: 'scored', label: 'Takes part' },
          { value: 'dns', label: 'Did not start' },
          { value: 'dq', label: 'Disqualified' },
        ]}
        onChange={(status) => onChange({ note: '', ...typed, status })}
      />
      <TextField
        id="note"
        label="Why"
        width="full"
        isOptional={typed.status !== 'dq'}
        hint="Kept with the event; the public does not see it."
        value={typed.note ?? ''}
        error={errors['note']}
        onChange={(note) => onChange({ ...typed, note })}
      />
    </div>
  );
}

/** Drafts survive a reload of the page, in this tab. */
function useDrafts(name: string): [Record<string, unknown>, (key: string, draft: unknown) => void] {
  const [drafts, setDrafts] = useState<Record<string, unknown>>(() => {
    try {
      return JSON.parse(sessionStorage.getItem(name) ?? '{}') as Record<string, unknown>;
    } catch {
      return {};
    }
  });
  const set = (key: string, draft: unknown) => {
    setDrafts((before) => {
      const after = Object.fromEntries(Object.entries(before).filter(([k]) => k !== key));
      if (draft !== undefined) after[key] = draft;
      try {
        sessionStorage.setItem(name, JSON.stringify(after));
      } catch {
        // A full or closed store only means that a reload would lose it.
      }
      return after;
    });
  };
  return [drafts, set];
}

function useOutbox(personId: string, onSent: () => void): { outbox: Outbox; items: OutboxItem[]; lasting: boolean } {
  const [outbox] = useState(() => new Outbox(personId));
  const [state, setState] = useState<{ items: OutboxItem[]; lasting: boolean }>({ items: [], lasting: true });
  const before = useRef(0);
  const sent = useRef(onSent);
  sent.current = onSent;
  useEffect(
    () =>
      outbox.subscribe((items, lasting) => {
        if (items.length < before.current) sent.current();
        before.current = items.length;
        setState({ items, lasting });
      }),
    [outbox],
  );
  return { outbox, ...state };
}

/** Asks again whenever the tournament says that something changed. */
function useLive(url: string, again: () => void): void {
  const latest = useRef(again);
  latest.current = again;
  useEffect(() => {
    const source = new EventSource(url);
    let timer: ReturnType<typeof setTimeout> | null = null;
    source.onmessage = () => {
      timer ??= setTimeout(() => {
        timer = null;
        latest.current();
      }, 300);
    };
    return () => {
      source.close();
      if (timer) clearTimeout(timer);
    };
  }, [url]);
}

/**
 * Calls `mark` for a field that was left, but not while a pointer is down: a message that appears above a button just as it is
 * pressed would move it away from under the finger.
 */
function useLeaving(mark: (field: string) => void): (field: string) => void {
  const latest = useRef(mark);
  latest.current = mark;
  const pending = useRef<string[]>([]);
  const isDown = useRef(false);
  useEffect(() => {
    const down = () => {
      isDown.current = true;
    };
    const up = () => {
      isDown.current = false;
      const fields = pending.current;
      pending.current = [];
      // After the press itself has been dealt with.
      if (fields.length > 0) setTimeout(() => fields.forEach((field) => latest.current(field)), 0);
    };
    window.addEventListener('pointerdown', down, true);
    window.addEventListener('pointerup', up, true);
    window.addEventListener('pointercancel', up, true);
    return () => {
      window.removeEventListener('pointerdown', down, true);
      window.removeEventListener('pointerup', up, true);
      window.removeEventListener('pointercancel', up, true);
    };
  }, []);
  return (field) => {
    if (isDown.current) pending.current.push(field);
    else latest.current(field);
  };
}

type PartState = 'kept' | 'waiting' | 'draft' | 'none';
const STATE_WORDS: Record<PartState, string> = { kept: 'kept', waiting: 'on this device', draft: 'typed, not kept', none: 'open' };

function partState(team: EntryTeam, part: string, waiting: readonly OutboxItem[], drafts: Record<string, unknown>): PartState {
  if (waiting.some((i) => i.body['teamId'] === team.id && i.body['part'] === part)) return 'waiting';
  if (drafts[`${team.id}/${part}`] !== undefined) return 'draft';
  return team.kept[part] ? 'kept' : 'none';
}

function TeamList(props: {
  module: AnyEventModule;
  teams: EntryTeam[];
  chosen: string | null;
  items: readonly OutboxItem[];
  drafts: Record<string, unknown>;
  onChoose: (teamId: string) => void;
}) {
  const [search, setSearch] = useState('');
  const wanted = search.trim().toLowerCase();
  const shown = wanted === '' ? props.teams : props.teams.filter((t) => `${t.label} ${t.name} ${t.schoolName}`.toLowerCase().includes(wanted));
  return (
    <div className="stack gap-3">
      {props.teams.length > 8 && <TextField id="find-team" type="search" label="Find a team" width="full" value={search} onChange={setSearch} />}
      {shown.length === 0 && props.teams.length > 0 && <p className="muted">No team has “{search}” in its number, name or school.</p>}
      <ol className="entry-list">
        {shown.map((team) => {
          const out = readStatus(team.kept[STATUS_PART]?.value).status;
          const words =
            out === 'scored'
              ? props.module.parts.map((p) => `${p.name}: ${STATE_WORDS[partState(team, p.key, props.items, props.drafts)]}`).join(' · ')
              : STATUS_WORDS[out];
          return (
            <li key={team.id}>
              <button type="button" aria-current={team.id === props.chosen ? 'true' : undefined} onClick={() => props.onChoose(team.id)}>
                <span className="num entry-number">{team.label}</span>
                <span>
                  <b>{team.name}</b>
                  <span className="small muted">{words}</span>
                </span>
              </button>
            </li>
          );
        })}
      </ol>
    </div>
  );
}

function Lines({ lines }: { lines: { label: string; value: string }[] }) {
  return (
    <dl className="definition lined num">
      {lines.map((line) => (
        <Fragment key={line.label}>
          <dt>{line.label}</dt>
          <dd>{line.value}</dd>
        </Fragment>
      ))}
    </dl>
  );
}

const KEEP_WORDS: Record<string, string> = { [STATUS_PART]: 'Keep this', test: 'Keep these points' };

function Desk(props: EntryFormHostProps) {
  const client = useQueryClient();
  const queryKey = useMemo(() => ['entry', props.endpoint], [props.endpoint]);
  const { data: state, isError, refetch } = useQuery({
    queryKey,
    queryFn: ({ signal }) => callApi<EntryState>('GET', props.endpoint, undefined, { signal }),
    initialData: props.initial,
  });
  useLive(props.liveUrl, () => void refetch());
  const { outbox, items: all, lasting } = useOutbox(props.person.id, () => void refetch());
  const items = useMemo(() => all.filter((i) => i.url === props.endpoint), [all, props.endpoint]);
  const waiting = items.filter((i) => !i.refusal);
  const module = useMemo(() => getEventModule(state.event.moduleKey), [state.event.moduleKey]);
  const { setup } = state;
  const [forms, setForms] = useState<Forms | null>(null);
  const [drafts, setDraft] = useDrafts(`fairlead-drafts:${props.person.id}:${props.endpoint}`);
  const [teamId, setTeamId] = useState<string | null>(null);
  const [part, setPart] = useState(module.parts[0]!.key);
  const [reason, setReason] = useState('');
  const [left, setLeft] = useState<string[]>([]);
  const [tries, setTries] = useState(0);
  const [tried, setTried] = useState(false);
  const [refused, setRefused] = useState<{ fields: Record<string, string>; words: string[] }>({ fields: {}, words: [] });
  const [busy, setBusy] = useState(false);
  const [said, setSaid] = useState<{ text: string; tone: 'ok' | 'wait' }>({ text: '', tone: 'ok' });
  const [disagreement, setDisagreement] = useState<Disagreement | null>(null);
  const heading = useRef<HTMLHeadingElement>(null);

  useEffect(() => {
    let here = true;
    void ENTRY_FORMS[state.event.moduleKey as EventModuleKey]().then((loaded) => {
      if (here) setForms({ ...(loaded as unknown as Forms), [STATUS_PART]: StatusForm });
    });
    return () => {
      here = false;
    };
  }, [state.event.moduleKey]);

  // A team's address can be kept and sent: #S09.
  const teamsNow = useRef(state.teams);
  teamsNow.current = state.teams;
  useEffect(() => {
    const fromAddress = () => {
      const label = decodeURIComponent(location.hash.slice(1));
      setTeamId(teamsNow.current.find((t) => t.label === label)?.id ?? null);
    };
    fromAddress();
    window.addEventListener('hashchange', fromAddress);
    return () => window.removeEventListener('hashchange', fromAddress);
  }, []);

  const hasDrafts = Object.keys(drafts).length > 0;
  const atRisk = hasDrafts || (!lasting && waiting.length > 0);
  useEffect(() => {
    if (!atRisk) return undefined;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [atRisk]);

  const team = state.teams.find((t) => t.id === teamId) ?? null;
  const draftKey = team ? `${team.id}/${part}` : '';
  const draft = drafts[draftKey];
  const kept: KeptPart | undefined = team?.kept[part];
  const isWaiting = team !== null && partState(team, part, waiting, {}) === 'waiting';
  const editing = draft !== undefined || (!kept && !isWaiting);
  const schema = part === STATUS_PART || setup === null ? statusSchema : module.parts.find((p) => p.key === part)!.schema(setup);
  const checked: Checked<unknown> = checkValue<unknown>(schema as never, draft ?? {});
  const problems: Record<string, string> = checked.ok ? {} : Object.fromEntries(checked.fields.map((f) => [f.path, f.message]));
  const errors = tried ? problems : { ...refused.fields, ...Object.fromEntries(left.flatMap((path) => (problems[path] ? [[path, problems[path]]] : []))) };
  const takes = state.event.state === 'open' && state.locked && setup !== null;
  const partName = (key: string) => module.parts.find((p) => p.key === key)?.name ?? 'Takes part';

  function fresh(): void {
    setReason('');
    setLeft([]);
    setTried(false);
    setRefused({ fields: {}, words: [] });
    setDisagreement(null);
    setSaid({ text: '', tone: 'ok' });
  }
  function choose(id: string | null, toPart?: string): void {
    fresh();
    setTeamId(id);
    if (toPart) setPart(toPart);
    const label = state.teams.find((t) => t.id === id)?.label ?? '';
    history.replaceState(null, '', label ? `#${label}` : location.pathname);
    requestAnimationFrame(() => heading.current?.focus());
  }
  const leave = useLeaving((field) => setLeft((before) => (before.includes(field) ? before : [...before, field])));
  const nextTeam = (() => {
    if (!team) return null;
    const at = state.teams.indexOf(team);
    const order = [...state.teams.slice(at + 1), ...state.teams.slice(0, at)];
    return order.find((t) => partState(t, part, waiting, {}) === 'none' && readStatus(t.kept[STATUS_PART]?.value).status === 'scored') ?? null;
  })();

  async function keep(value: unknown, baseVersion: number, why: string): Promise<void> {
    if (!team) return;
    setBusy(true);
    const body = { teamId: team.id, part, value, baseVersion, setupVersion: state.setupVersion, reason: why };
    const sent = await outbox.keep<KeptAnswer>(props.endpoint, body, `${team.label} ${team.name}, ${partName(part)}`);
    setBusy(false);
    if (sent.state === 'kept') {
      const now: KeptPart = { value, version: sent.answer.version, keptAt: sent.answer.keptAt, keptBy: props.person.name };
      client.setQueryData<EntryState>(
        queryKey,
        (before) => before && { ...before, teams: before.teams.map((t) => (t.id === team.id ? { ...t, kept: { ...t.kept, [part]: now } } : t)) },
      );
      setDraft(draftKey, undefined);
      fresh();
      setSaid({ text: sent.answer.agreed ? 'Somebody had kept the same already: you agree.' : keptAt(new Date(sent.answer.keptAt), props.zone), tone: 'ok' });
    } else if (sent.state === 'waiting') {
      setDraft(draftKey, undefined);
      fresh();
      setSaid({ text: sent.why, tone: 'wait' });
    } else {
      await outbox.discard(sent.key);
      const { problem } = sent;
      const theirs = problem.extra['current'] as Disagreement['theirs'] | null | undefined;
      if (problem.code === 'stale' && theirs) {
        setDraft(draftKey, value);
        setDisagreement({ mine: value, theirs });
        return;
      }
      if (problem.code === 'conflict' || problem.code === 'out-of-order' || problem.code === 'stale') void refetch();
      setRefused({
        fields: Object.fromEntries(problem.fields.map((f) => [f.path.replace(/^value\.?/, ''), f.message])),
        words: problem.fields.length > 0 ? [] : [problem.detail],
      });
      setTried(false);
      setTries((n) => n + 1);
    }
  }

  function submit(): void {
    setSaid({ text: '', tone: 'ok' });
    setRefused({ fields: {}, words: [] });
    setTried(true);
    if (!checked.ok) {
      setTries((n) => n + 1);
      return;
    }
    void keep(checked.value, kept?.version ?? 0, reason);
  }

  const inField = state.teams.filter((t) => readStatus(t.kept[STATUS_PART]?.value).status === 'scored');
  const progress = module.parts.map((p) => `${p.name}: ${inField.filter((t) => t.kept[p.key]).length} of ${inField.length}`).join(' · ');
  const Form = forms?.[part];
  const showSummary = tried || refused.words.length > 0 || Object.keys(refused.fields).length > 0;
  const summary = [...Object.entries(errors).map(([path, message]) => ({ id: path === '' ? undefined : path, message })), ...refused.words.map((message) => ({ message }))];
  const tabs = [...module.parts.map((p) => ({ key: p.key, name: p.name })), { key: STATUS_PART, name: 'Takes part' }];

  function toTab(key: string): void {
    fresh();
    setPart(key);
  }

  return (
    <div className="stack">
      {waiting.length > 0 && (
        <Notice tone="wait" title={`${waiting.length === 1 ? 'One reading is' : `${waiting.length} readings are`} on this device and not yet sent.`}>
          {waiting.map((i) => i.label).join('; ')}. {lasting ? 'They stay here if you close the page.' : 'This browser keeps nothing for later: leave the page open.'}{' '}
          <Button size="small" onPress={() => void outbox.flush()}>
            Send now
          </Button>
        </Notice>
      )}
      {items.flatMap((item) =>
        item.refusal && !busy
          ? [
              <Notice key={item.key} tone="bad" title={`${item.label}: not kept.`}>
                {item.refusal.detail}{' '}
                <Button
                  size="small"
                  onPress={() => {
                    const to = item.body['teamId'] as string;
                    const toPart = item.body['part'] as string;
                    setDraft(`${to}/${toPart}`, item.body['value']);
                    void outbox.discard(item.key);
                    void refetch();
                    choose(to, toPart);
                  }}
                >
                  Look at it again
                </Button>
              </Notice>,
            ]
          : [],
      )}
      {isError && <Notice tone="wait">The list could not be loaded afresh: there is no network, or the server is away. It is tried again.</Notice>}
      {!takes && (
        <Notice tone="wait" title={state.event.state === 'open' ? 'Scoring waits.' : state.event.state === 'accepted' ? 'This event is accepted.' : 'This event is handed in.'}>
          {state.event.state === 'open' ? 'The set-up is not locked. ' : 'Its readings stay as they are until it is taken back. '}
          <a href={state.event.state === 'open' ? `${props.base}/setup` : props.base}>{state.event.state === 'open' ? 'Go to the set-up' : 'Go to the event'}</a>
        </Notice>
      )}
      <div className="entry" data-chosen={team ? '' : undefined}>
        <section className="entry-teams" aria-label="Teams">
          {state.teams.length > 0 && <p className="muted num">Kept so far: {progress}</p>}
          <TeamList module={module} teams={state.teams} chosen={teamId} items={waiting} drafts={drafts} onChoose={(id) => choose(id)} />
        </section>
        <section className="entry-form" aria-label="Reading">
          {!team && (
            <div className="empty">
              <p>
                <b>{state.teams.length === 0 ? 'No team is entered in this division yet.' : 'Choose a team to enter its readings.'}</b>
              </p>
              {state.teams.length > 0 && <p className="muted">Each reading is kept by itself; what you type stays on this device until it is.</p>}
            </div>
          )}
          {team && (
            <div className="stack">
              <div className="entry-head">
                <Button tone="quiet" size="small" className="entry-back" onPress={() => choose(null)}>
                  All teams
                </Button>
                <h2 ref={heading} tabIndex={-1}>
                  <span className="num">{team.label}</span> {team.name}
                </h2>
                <p className="small muted">
                  {team.schoolName} · <a href={`${props.base}/history/${team.id}`}>Everything kept of this team</a>
                </p>
              </div>
              <div role="tablist" aria-label="What to enter" className="tabs">
                {tabs.map((tab) => (
                  <button
                    key={tab.key}
                    type="button"
                    role="tab"
                    id={`tab-${tab.key}`}
                    aria-selected={tab.key === part}
                    aria-controls="entry-panel"
                    tabIndex={tab.key === part ? 0 : -1}
                    onClick={() => toTab(tab.key)}
                    onKeyDown={(event) => {
                      const step = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
                      if (step === 0) return;
                      event.preventDefault();
                      const to = tabs[(tabs.findIndex((x) => x.key === part) + step + tabs.length) % tabs.length]!;
                      toTab(to.key);
                      document.getElementById(`tab-${to.key}`)?.focus();
                    }}
                  >
                    {tab.name}
                    {tab.key !== STATUS_PART && <small>{STATE_WORDS[partState(team, tab.key, waiting, drafts)]}</small>}
                  </button>
                ))}
              </div>
              <div role="tabpanel" id="entry-panel" aria-labelledby={`tab-${part}`} className="stack">
                {disagreement && (
                  <div className="error-summary" role="alert">
                    <h2>Two people typed different values. Which is right?</h2>
                    <dl className="definition">
                      <dt>{disagreement.theirs.keptBy}</dt>
                      <dd>
                        {describe(module, setup, part, disagreement.theirs.value)}
                        <br />
                        <span className="muted">{keptAt(new Date(disagreement.theirs.keptAt), props.zone)}</span>
                      </dd>
                      <dt>You</dt>
                      <dd>{describe(module, setup, part, disagreement.mine)}</dd>
                    </dl>
                    <div className="cluster">
                      <Button
                        onPress={() => {
                          setDraft(draftKey, undefined);
                          fresh();
                          void refetch();
                        }}
                      >
                        Theirs is right
                      </Button>
                      <Button
                        tone="primary"
                        onPress={() => {
                          const { theirs, mine } = disagreement;
                          setDisagreement(null);
                          void keep(mine, theirs.version, `${theirs.keptBy} had typed another value; this one was found right.`.slice(0, 300));
                        }}
                      >
                        Mine is right
                      </Button>
                    </div>
                  </div>
                )}
                {!editing && !isWaiting && kept && (
                  <>
                    <Lines lines={workings(module, setup, part, kept.value)} />
                    <p className="small muted">
                      {keptAt(new Date(kept.keptAt), props.zone)} by {kept.keptBy}
                      {kept.version > 1 && `, changed ${kept.version === 2 ? 'once' : `${kept.version - 1} times`}`}
                    </p>
                  </>
                )}
                {isWaiting && !editing && <p>This is on this device and is sent as soon as the server can be reached.</p>}
                {editing && !disagreement && (
                  <form
                    className="stack"
                    noValidate
                    onSubmit={(event) => {
                      event.preventDefault();
                      submit();
                    }}
                  >
                    <ErrorSummary errors={showSummary ? summary : []} focusKey={tries} />
                    {Form && setup !== null ? (
                      <Form
                        key={draftKey}
                        setup={setup}
                        draft={draft ?? {}}
                        errors={errors}
                        isDisabled={!takes}
                        onLeave={leave}
                        onChange={(next) => {
                          setRefused({ fields: {}, words: [] });
                          setDraft(draftKey, next);
                        }}
                      />
                    ) : (
                      <p className="muted" role="status">
                        {setup === null ? 'The set-up comes first.' : 'Loading the form…'}
                      </p>
                    )}
                    {kept && <TextField id="reason" label="Why it is changed" isOptional width="full" hint="Such as: read again, typed wrong. Both values are kept." value={reason} onChange={setReason} />}
                    <div className="cluster">
                      <Button type="submit" tone="primary" size="big" busy={busy ? 'Keeping…' : false} isDisabled={!takes}>
                        {kept ? 'Keep the change' : (KEEP_WORDS[part] ?? 'Keep this reading')}
                      </Button>
                      {kept && (
                        <Button
                          onPress={() => {
                            setDraft(draftKey, undefined);
                            fresh();
                          }}
                        >
                          Leave it as it was
                        </Button>
                      )}
                    </div>
                  </form>
                )}
                <Status text={said.text} tone={said.tone} />
                {!editing && (
                  <div className="cluster">
                    {nextTeam && takes && (
                      <Button tone="primary" size="big" onPress={() => choose(nextTeam.id)}>
                        Next: {nextTeam.label} {nextTeam.name}
                      </Button>
                    )}
                    {takes && kept && !isWaiting && (
                      <Button
                        onPress={() => {
                          fresh();
                          setDraft(draftKey, kept.value);
                        }}
                      >
                        Change it
                      </Button>
                    )}
                  </div>
                )}
              </div>
            </div>
          )}
        </section>
      </div>
    </div>
  );
}

/** Readings of one event, team by team, on a phone, a tablet or a desk. */
export default function EntryForm(props: EntryFormHostProps) {
  return (
    <QueryClientProvider client={queryClient()}>
      <Desk {...props} />
    </QueryClientProvider>
  );
}
