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
