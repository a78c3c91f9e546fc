/** Entries of the trail on one page. */
export const AUDIT_PAGE = 50;

/** What the trail can be narrowed to, each with the first words of its actions. */
export const AUDIT_KINDS: readonly { value: string; label: string; nouns: readonly string[] }[] = [
  { value: 'scores', label: 'Scores', nouns: ['score'] },
  { value: 'results', label: 'Releases', nouns: ['results'] },
  { value: 'events', label: 'Events and their set-ups', nouns: ['event', 'setup'] },
  { value: 'entries', label: 'Schools and teams', nouns: ['school', 'team'] },
  { value: 'tournaments', label: 'Tournaments and divisions', nouns: ['tournament', 'division'] },
  { value: 'people', label: 'People and roles', nouns: ['invitation', 'role', 'person', 'leader'] },
  { value: 'office', label: 'The office itself', nouns: ['organization'] },
];
