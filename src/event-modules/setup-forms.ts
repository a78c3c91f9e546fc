/** The set-up form of every kind of event, loaded when it is needed. A new kind adds one line. */
import type { ComponentType } from 'react';
import type { EventModuleKey } from './registry';

export interface SetupFormProps<Setup> {
  setup: Setup;
  onChange: (setup: Setup) => void;
  /** Messages by field, dots for nesting. */
  errors: Readonly<Record<string, string>>;
  isDisabled: boolean;
}

export const SETUP_FORMS = {
  'optics-shoot': () => import('./optics-shoot/setup-form').then((m) => m.OpticsSetupForm as ComponentType<SetupFormProps<unknown>>),
  'written-test': () => import('./written-test/setup-form').then((m) => m.WrittenTestSetupForm as ComponentType<SetupFormProps<unknown>>),
} satisfies Record<EventModuleKey, () => Promise<ComponentType<SetupFormProps<unknown>>>>;
