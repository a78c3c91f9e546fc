import type { Role } from '~/server/scope';

/** The place of a role by name, as far as it has one. */
export interface RolePlace {
  tournament: { slug: string; shortName: string } | null;
  event: { slug: string; name: string; division: string } | null;
  school: { name: string } | null;
}

/** An invitation with the words that its mail and its page need. */
export interface InvitationRow extends RolePlace {
  id: string;
  email: string;
  role: Role;
  tournamentId: string | null;
  eventId: string | null;
  schoolId: string | null;
  invitedBy: string;
  createdAt: Date;
  expiresAt: Date;
  acceptedAt: Date | null;
  acceptedBy: string | null;
  revokedAt: Date | null;
}

/** One role somebody holds, with the words of its place. */
export interface MembershipRow extends RolePlace {
  id: string;
  personId: string;
  name: string;
  email: string;
  role: Role;
  tournamentId: string | null;
  eventId: string | null;
  schoolId: string | null;
  state: 'active' | 'suspended';
  createdAt: Date;
}

/** Where roles can be given: what the selects of an invitation offer. */
export interface Places {
  tournaments: { value: string; label: string }[];
  events: { value: string; label: string }[];
  schools: { value: string; label: string }[];
}

/** One tournament in the office's list. */
export interface OfficeTournament {
  id: string;
  slug: string;
  name: string;
  day: string;
  venue: string;
  isPublished: boolean;
  events: number;
  handedIn: number;
  teams: number;
  releases: number;
  /** From when the public sees the first release; null when there is none. */
  publicFrom: Date | null;
}
