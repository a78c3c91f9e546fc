/**
 * Address parts under an organization that are not tournaments. A test compares this list with the
 * real routes, so a new route can't be shadowed by an old tournament.
 */
export const RESERVED_TOURNAMENT_SLUGS = ['office', 'join', 'invitations', 'people', 'settings', 'schools', 'audit', 'tournaments', 'new', 'live', 'api', 'results', 'feeds', 'help', 'season'] as const;
