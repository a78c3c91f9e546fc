import { useEffect, useMemo, useRef, useState, type ComponentType } from 'react';
import { callApi, type ApiProblem } from '~/client/api';
import { Button } from '~/components/react/Button';
import { ErrorSummary } from '~/components/react/ErrorSummary';
import { Notice } from '~/components/react/Notice';
import { SelectField } from '~/components/react/SelectField';
import { keptAt, Status } from '~/components/react/Status';
import { checkValue } from '~/domain/fields';
import type { AnyEventModule } from '~/event-modules/contract';
import { getEventModule, type EventModuleKey } from '~/event-modules/registry';
import { SETUP_FORMS, type SetupFormProps } from '~/event-modules/setup-forms';

export interface ProfileEditorProps {
  moduleKey: string;
  setup: unknown;
  version: number;
  /** Where the set-up is kept; `/lock` behind it locks. */
  endpoint: string;
  zone: string;
  mayEdit: boolean;
  siblings: { slug: string; label: string; setup: unknown }[];
}

/** What a set-up does to invented teams: places, scores and where they come from. */
function Effect({ module, setup, before }: { module: AnyEventModule; setup: unknown; before: unknown }) {
  const rows = useMemo(() => module.rank(setup, module.sampleTeams(setup)), [module, setup]);
  const parts = useMemo(() => new Map(module.sampleTeams(setup).map((t) => [t.id, t.parts])), [module, setup]);
  const earlier = useMemo(() => {
    if (before === null) return null;
    return new Map(module.rank(before, module.sampleTeams(before)).map((r) => [r.id, r.place]));
  }, [module, before]);
  const first = module.score(setup, parts.get(rows[0]?.id ?? '') ?? {});
  return (
    <div className="table-scroll" role="region" aria-label="Sample teams" tabIndex={0}>
      <table className="table dense">
        <caption className="sr-only">What this set-up does to six invented teams</caption>
        <thead>
          <tr>
            <th className="n" scope="col">Place</th>
            <th scope="col">Team</th>
            <th className="n" scope="col">{module.scoreScale(setup).label}</th>
            {first.details.map((d) => (
              <th key={d.key} className="n" scope="col">
                {d.label}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => {
            const score = module.score(setup, parts.get(row.id) ?? {});
            const was = earlier?.get(row.id) ?? null;
            const moved = was !== null && row.place !== null && was !== row.place;
            return (
              <tr key={row.id}>
                <td className="n">
                  <b>{row.place}</b>
                  {moved && <span className="small muted"> was {was}</span>}
                </td>
                <th scope="row">{row.id}</th>
                <td className="n">{row.display}</td>
                {first.details.map((d) => (
                  <td key={d.key} className="n">
                    {score.details.find((x) => x.key === d.key)?.display ?? '–'}
                  </td>
                ))}
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

/** The host of every kind's set-up form: keeps, shows the effect on invented teams as it is typed, and locks. */
export default function ProfileEditor(props: ProfileEditorProps) {
  const module = useMemo(() => getEventModule(props.moduleKey), [props.moduleKey]);
  const [Form, setForm] = useState<ComponentType<SetupFormProps<unknown>> | null>(null);
  const [setup, setSetup] = useState<unknown>(props.setup);
  const [kept, setKept] = useState<{ setup: unknown; version: number }>({ setup: props.setup, version: props.version });
  const [refused, setRefused] = useState<{ fields: Record<string, string>; words: string[]; count: number }>({ fields: {}, words: [], count: 0 });
  const [status, setStatus] = useState('');
  const [busy, setBusy] = useState(false);
  const [tried, setTried] = useState(false);
  const lastGood = useRef<unknown>(props.setup);
  const unchanged = JSON.stringify(setup) === JSON.stringify(kept.setup);

  useEffect(() => {
    let here = true;
    void SETUP_FORMS[props.moduleKey as EventModuleKey]().then((loaded) => {
      if (here) setForm(() => loaded);
    });
    return () => {
      here = false;
    };
  }, [props.moduleKey]);

  // Leaving with something typed and not kept asks first.
  useEffect(() => {
    if (unchanged || !props.mayEdit) return undefined;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [unchanged, props.mayEdit]);

  const checked = useMemo(() => checkValue(module.setup.schema, setup), [module, setup]);
  if (checked.ok) lastGood.current = checked.value;
  const errors = tried && !checked.ok ? Object.fromEntries(checked.fields.map((f) => [f.path, f.message])) : refused.fields;
  const findings = checked.ok ? module.setup.findings(checked.value) : [];

  async function keep(): Promise<number | null> {
    setTried(true);
    setStatus('');
    if (!checked.ok) {
      setRefused((r) => ({ fields: {}, words: [], count: r.count + 1 }));
      return null;
    }
    setBusy(true);
    try {
      const answer = await callApi<{ version: number; setup: unknown }>('PUT', props.endpoint, { setup: checked.value, baseVersion: kept.version });
      setKept(answer);
      setSetup(answer.setup);
      setRefused({ fields: {}, words: [], count: 0 });
      setStatus(keptAt(new Date(), props.zone));
      return answer.version;
    } catch (error) {
      const problem = error as ApiProblem;
      const fields = Object.fromEntries(problem.fields.map((f) => [f.path.replace(/^setup\.?/, ''), f.message]));
      setRefused((r) => ({ fields, words: problem.fields.length > 0 ? [] : [problem.detail], count: r.count + 1 }));
      return null;
    } finally {
      setBusy(false);
    }
  }

  async function lock(): Promise<void> {
    const version = unchanged && kept.version > 0 ? kept.version : await keep();
    if (version === null) return;
    setBusy(true);
    try {
      const answer = await callApi<{ goTo: string }>('POST', `${props.endpoint}/lock`, { version });
      window.location.assign(answer.goTo);
    } catch (error) {
      const problem = error as ApiProblem;
      setRefused((r) => ({ fields: {}, words: [problem.detail, ...problem.fields.map((f) => f.message)], count: r.count + 1 }));
      setBusy(false);
    }
  }

  const summary = [
    ...Object.entries(errors).map(([path, message]) => ({ id: path === '' ? undefined : path, message })),
    ...refused.words.map((message) => ({ message })),
  ];

  return (
    <div className="grid items-start gap-8 xl:grid-cols-[minmax(0,1.15fr)_minmax(0,1fr)]">
      <form
        className="stack"
        noValidate
        onSubmit={(event) => {
          event.preventDefault();
          void keep();
        }}
      >
        <ErrorSummary errors={summary} focusKey={refused.count} />
        {props.mayEdit && props.siblings.length > 0 && (
          <SelectField
            label="Start from another division’s set-up"
            placeholder="Leave as it is"
            value=""
            options={props.siblings.map((s) => ({ value: s.slug, label: s.label }))}
            onChange={(slug) => {
              const found = props.siblings.find((s) => s.slug === slug);
              if (found) setSetup(found.setup);
            }}
          />
        )}
        {Form ? (
          <Form setup={setup} onChange={setSetup} errors={errors} isDisabled={!props.mayEdit} />
        ) : (
          <p className="muted" role="status">
            Loading the form…
          </p>
        )}
        {props.mayEdit && (
          <div className="cluster">
            <Button type="submit" tone="primary" busy={busy ? 'Keeping…' : false}>
              Keep the set-up
            </Button>
            <Button onPress={() => void lock()} isDisabled={busy}>
              Lock and open scoring
            </Button>
            <Status text={status || (unchanged ? (kept.version > 0 ? `Version ${kept.version}, as kept` : 'Not kept yet') : 'Not kept yet')} tone={status ? 'ok' : 'plain'} />
          </div>
        )}
      </form>
      <section className="panel xl:sticky xl:top-4" aria-labelledby="effect">
        <header>
          <h2 id="effect">What it does to six invented teams</h2>
          {!checked.ok && <span className="small muted">as last complete</span>}
        </header>
        <div className="panel-body stack">
          <Effect module={module} setup={lastGood.current} before={kept.version > 0 && !unchanged ? kept.setup : null} />
          <div>
            <h3>When scores are equal</h3>
            <ol className="lines">
              {module.tieBreakWords(lastGood.current).map((line) => (
                <li key={line}>{line}</li>
              ))}
            </ol>
          </div>
          {findings.map((f) => (
            <Notice key={f.code} tone="wait">
              {f.message}
            </Notice>
          ))}
        </div>
      </section>
    </div>
  );
}
