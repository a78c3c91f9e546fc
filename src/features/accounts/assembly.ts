import { counted } from '~/domain/time';
import type { Role } from '~/server/scope';
import type { Belonging } from './types';

const BROWSERS: readonly (readonly [RegExp, string])[] = [
  [/\bEdgA?\//, 'Edge'],
  [/\bOPR\//, 'Opera'],
  [/\bSamsungBrowser\//, 'Samsung Internet'],
  [/\b(Firefox|FxiOS)\//, 'Firefox'],
  [/\b(Chrome|CriOS|HeadlessChrome)\//, 'Chrome'],
  [/\bVersion\/[\d.]+ .*Safari\//, 'Safari'],
];
const SYSTEMS: readonly (readonly [RegExp, string])[] = [
  [/\biPhone\b/, 'iPhone'],
  [/\biPad\b/, 'iPad'],
  [/\bAndroid\b/, 'Android'],
  [/\bCrOS\b/, 'ChromeOS'],
  [/\bWindows\b/, 'Windows'],
  [/\bMac OS X\b|\bMacintosh\b/, 'Mac'],
  [/\bLinux\b/, 'Linux'],
];

/** What a device calls itself, in words its owner knows it by: 'Firefox on Windows'. */
export function deviceWords(userAgent: string | null | undefined): string {
  const find = (list: readonly (readonly [RegExp, string])[]) => list.find(([pattern]) => pattern.test(userAgent ?? ''))?.[1];
  const browser = find(BROWSERS);
  const system = find(SYSTEMS);
  if (browser && system) return `${browser} on ${system}`;
  return browser ?? (system ? `A browser on ${system}` : 'An unknown device');
}

/** How long ago, in one step: 'just now', '12 minutes ago', '3 days ago'. Needs no time zone. */
export function agoWords(moment: Date, from: Date): string {
  const minutes = Math.floor((from.getTime() - moment.getTime()) / 60_000);
  if (minutes < 6) return 'just now';
  if (minutes < 60) return `${minutes} minutes ago`;
  if (minutes < 36 * 60) return `${counted(Math.round(minutes / 60), 'hour')} ago`;
  return `${counted(Math.round(minutes / 1440), 'day')} ago`;
}

/** The place of a role by the parts of its address. */
export interface PlaceParts {
  tournament: { slug: string } | null;
  event: { slug: string } | null;
  /** For a coach: the newest tournament in which the school has a team. */
  schoolTournament: string | null;
}

/** Where the work of a role is done. */
export function placePath(orgSlug: string, role: Role, place: PlaceParts): string {
  const tournament = place.tournament && `/${orgSlug}/${place.tournament.slug}`;
  switch (role) {
    case 'owner':
    case 'treasurer':
      return `/${orgSlug}/office`;
    case 'director':
      return tournament ? `${tournament}/overview` : `/${orgSlug}/office`;
    case 'leader':
      return tournament && place.event ? `${tournament}/events/${place.event.slug}` : `/${orgSlug}/office`;
    case 'volunteer':
      return tournament ?? `/${orgSlug}`;
    case 'coach':
      return place.schoolTournament ? `/${orgSlug}/${place.schoolTournament}/school` : `/${orgSlug}`;
  }
}

/** Where somebody goes who signs in without having been on the way anywhere: to their only place, or to their own page. */
export function landingPath(belongings: readonly Belonging[]): string {
  const open = belongings.filter((b) => !b.isSuspended);
  const [only] = open;
  return open.length === 1 && only!.places.length === 1 ? (only!.places[0]!.href ?? '/account') : '/account';
}
