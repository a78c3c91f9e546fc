import type { Role } from '~/server/scope';
import { ROLE_NAMES } from './constants';
import type { RolePlace } from './types';

/** A role with its place, in words: 'Director of Larkwater', 'Event leader of Optics Shoot (Senior) at Larkwater'. */
export function roleLabel(role: Role, place: RolePlace): string {
  const name = ROLE_NAMES[role];
  const tournament = place.tournament?.shortName;
  switch (role) {
    case 'owner':
    case 'treasurer':
      return name;
    case 'director':
      return tournament ? `${name} of ${tournament}` : name;
    case 'leader':
      return place.event ? `${name} of ${place.event.name} (${place.event.division})${tournament ? ` at ${tournament}` : ''}` : name;
    case 'volunteer':
      return tournament ? `${name} at ${tournament}` : name;
    case 'coach':
      return place.school ? `${name} of ${place.school.name}` : name;
  }
}

/** Where the work of a role is done. */
export function workPath(orgSlug: string, role: Role, place: RolePlace): string {
  if (role === 'leader' && place.tournament && place.event) return `/${orgSlug}/${place.tournament.slug}/events/${place.event.slug}`;
  if (role === 'director' && place.tournament) return `/${orgSlug}/${place.tournament.slug}/overview`;
  if (role === 'coach') return '/account';
  return `/${orgSlug}/office`;
}
