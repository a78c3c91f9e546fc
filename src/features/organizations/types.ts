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
