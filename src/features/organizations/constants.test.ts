import { readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { RESERVED_TOURNAMENT_SLUGS } from '../tournaments/constants';
import { currencyOptions, isCurrency, isTimeZone, RESERVED_ORGANIZATION_SLUGS, zoneOptions } from './constants';

const pages = fileURLToPath(new URL('../../pages/', import.meta.url));

/** Names right inside a folder of the pages that could be an organization's or a tournament's address. */
function names(folder: string): string[] {
  return readdirSync(pages + folder, { withFileTypes: true })
    .map((entry) => (entry.isDirectory() ? entry.name : entry.name.replace(/\.(astro|ts)$/, '')))
    .filter((name) => name !== 'index' && /^[a-z0-9](-?[a-z0-9])*$/.test(name));
}

describe('no page is shadowed by an address that somebody chooses', () => {
  test('organizations', () => {
    const routes = [...names(''), ...names('api')];
    expect(routes).toContain('new');
    for (const name of routes) expect(RESERVED_ORGANIZATION_SLUGS, `/${name} is a page: reserve it`).toContain(name);
  });

  test('tournaments', () => {
    const routes = [...names('[org]'), ...names('api/[org]')];
    expect(routes).toContain('office');
    for (const name of routes) expect(RESERVED_TOURNAMENT_SLUGS, `/[org]/${name} is a page: reserve it`).toContain(name);
  });

  test('every reserved name is one that could be chosen, and stands once', () => {
    for (const list of [RESERVED_ORGANIZATION_SLUGS, RESERVED_TOURNAMENT_SLUGS]) {
      expect(new Set(list).size).toBe(list.length);
      for (const slug of list) expect(slug).toMatch(/^[a-z0-9](-?[a-z0-9])*$/);
    }
  });
});

test('zones and currencies to choose from are ones that can be used, each once, with the one in use among them', () => {
  const zones = zoneOptions('US/Central').map((z) => z.value);
  expect(new Set(zones).size).toBe(zones.length);
  expect(zones).toContain('US/Central');
  expect(zones.length).toBeGreaterThan(300);
  for (const zone of zones) expect(isTimeZone(zone), zone).toBe(true);
  expect(isTimeZone('Nowhere/Here')).toBe(false);
  const currencies = currencyOptions().map((c) => c.value);
  expect(currencies[0]).toBe('USD');
  expect(new Set(currencies).size).toBe(currencies.length);
  for (const code of currencies) expect(isCurrency(code), code).toBe(true);
});
