/** Every kind of event, in the order they are offered. A new kind is its folder and one line here. */
import { DomainError } from '~/domain/domain-error';
import type { AnyEventModule } from './contract';
import { opticsShoot } from './optics-shoot/module';
import { writtenTest } from './written-test/module';

export const EVENT_MODULES = [opticsShoot, writtenTest] as const satisfies readonly AnyEventModule[];

export type EventModuleKey = (typeof EVENT_MODULES)[number]['key'];

/** All keys, for a column's check and for a form's choices. */
export const EVENT_MODULE_KEYS = EVENT_MODULES.map((module) => module.key) as readonly EventModuleKey[];

/** Whether `key` names a kind of event. */
export function isEventModuleKey(key: unknown): key is EventModuleKey {
  return (EVENT_MODULE_KEYS as readonly unknown[]).includes(key);
}

/**
 * The kind of event with this key.
 * @throws DomainError `unknown-module`.
 */
export function getEventModule(key: string): AnyEventModule {
  const module = (EVENT_MODULES as readonly AnyEventModule[]).find((candidate) => candidate.key === key);
  if (module === undefined) throw new DomainError('unknown-module', `There is no kind of event “${key}”.`);
  return module;
}
