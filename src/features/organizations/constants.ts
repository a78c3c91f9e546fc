import type { Role } from '~/server/scope';

/** An invitation can be accepted for this many days after it was last sent. */
export const INVITATION_DAYS = 14;

/** What a role is called. */
export const ROLE_NAMES: Record<Role, string> = {
  owner: 'Owner',
  treasurer: 'Treasurer',
  director: 'Director',
  leader: 'Event leader',
  volunteer: 'Volunteer',
  coach: 'Coach',
};

/** What somebody with the role does, for those who choose one. */
export const ROLE_HINTS: Record<Role, string> = {
  owner: 'Runs the office: people, settings, every tournament.',
  treasurer: 'Keeps the office’s books.',
  director: 'Runs one tournament.',
  leader: 'Prepares, runs and scores one event.',
  volunteer: 'Helps at one tournament.',
  coach: 'Brings the teams of one school.',
};

/**
 * Address parts that are not organizations: Fairlead's own pages, and names kept free for them. A test compares the list with
 * the real routes, so that no page can ever be shadowed by an organization, nor an organization by a page.
 */
export const RESERVED_ORGANIZATION_SLUGS: readonly string[] = [
  ...['400', '401', '403', '404', '500', 'about', 'account', 'accounts', 'admin', 'api', 'app', 'assets', 'check-mail', 'contact', 'demo'],
  ...['docs', 'fairlead', 'favicon', 'feeds', 'files', 'healthz', 'help', 'home', 'index', 'invitations', 'join', 'kits', 'legal', 'live'],
  ...['mail', 'new', 'office', 'operator', 'organizations', 'people', 'privacy', 'public', 'readyz', 'refused', 'reset', 'robots', 'search'],
  ...['security', 'sessions', 'settings', 'sign-in', 'sign-out', 'sign-up', 'signin', 'signout', 'signup', 'static', 'status', 'support'],
  ...['system', 'terms', 'tournaments', 'verify', 'well-known', 'www'],
];

/** Zones that most offices are in, by the names people use. */
const USUAL_ZONES: readonly (readonly [string, string])[] = [
  ['America/New_York', 'Eastern (New York)'],
  ['America/Chicago', 'Central (Chicago)'],
  ['America/Denver', 'Mountain (Denver)'],
  ['America/Phoenix', 'Mountain without summer time (Phoenix)'],
  ['America/Los_Angeles', 'Pacific (Los Angeles)'],
  ['America/Anchorage', 'Alaska (Anchorage)'],
  ['Pacific/Honolulu', 'Hawaii (Honolulu)'],
  ['America/Halifax', 'Atlantic (Halifax)'],
  ['Europe/London', 'United Kingdom (London)'],
  ['Europe/Berlin', 'Central Europe (Berlin)'],
  ['Australia/Sydney', 'Eastern Australia (Sydney)'],
  ['Pacific/Auckland', 'New Zealand (Auckland)'],
];

const USUAL_CURRENCIES = ['USD', 'CAD', 'EUR', 'GBP', 'AUD', 'NZD'];

/** True for a time zone that moments can be shown in. */
export function isTimeZone(zone: string): boolean {
  if (!/^[A-Za-z][A-Za-z0-9_+/-]{1,63}$/.test(zone)) return false;
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone });
    return true;
  } catch {
    return false;
  }
}

/** Zones to choose from: the usual ones by their names, then every other; the one in use is always among them. */
export function zoneOptions(inUse?: string): { value: string; label: string }[] {
  const usual = new Set(USUAL_ZONES.map(([value]) => value));
  const others = new Set([...Intl.supportedValuesOf('timeZone'), 'UTC', ...(inUse ? [inUse] : [])].filter((z) => !usual.has(z)));
  return [
    ...USUAL_ZONES.map(([value, label]) => ({ value, label })),
    ...[...others].sort().map((value) => ({ value, label: value.replaceAll('_', ' ').replaceAll('/', ' / ') })),
  ];
}

/** True for a currency in use (ISO 4217). */
export function isCurrency(code: string): boolean {
  return Intl.supportedValuesOf('currency').includes(code);
}

/** Currencies to choose from, the usual ones first. */
export function currencyOptions(): { value: string; label: string }[] {
  const names = new Intl.DisplayNames('en', { type: 'currency' });
  const all = [...USUAL_CURRENCIES, ...Intl.supportedValuesOf('currency').filter((c) => !USUAL_CURRENCIES.includes(c))];
  return all.map((value) => ({ value, label: `${value}: ${names.of(value) ?? value}` }));
}
