/** The entry form of every part of every kind of event, loaded when it is needed. A new kind adds one line. */
import type { ComponentType } from 'react';
import type { EventModuleKey } from './registry';

export interface EntryFormProps<Setup = unknown> {
  setup: Setup;
  /** What is typed so far, in the shape of the part's value; texts stay as typed. */
  draft: unknown;
  onChange: (draft: unknown) => void;
  /** Messages by field, dots for nesting. */
  errors: Readonly<Record<string, string>>;
  /** Called when a field is left, so that what is wrong there is said. */
  onLeave: (field: string) => void;
  isDisabled: boolean;
}

type Forms = Record<string, ComponentType<EntryFormProps<never>>>;

export const ENTRY_FORMS = {
  'optics-shoot': () => Promise.all([import('./optics-shoot/run-form'), import('./test-form')]).then(([run, test]) => ({ run: run.OpticsRunForm, test: test.opticsTestForm }) as Forms),
  'written-test': () => import('./test-form').then((m) => ({ test: m.writtenTestForm }) as Forms),
} satisfies Record<EventModuleKey, () => Promise<Forms>>;
