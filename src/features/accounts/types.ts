/** What a one-time code is for. */
export type CodePurpose = 'verify' | 'reset' | 'change';

/** One session as its owner sees it. */
export interface SessionRow {
  /** SHA-256 of the cookie's value: names the session, opens nothing. */
  id: string;
  device: string;
  startedAt: Date;
  lastUsedAt: Date;
}

/** One role somebody holds, with the words and addresses of the place. */
export interface Place {
  role: 'owner' | 'treasurer' | 'director' | 'leader' | 'volunteer' | 'coach';
  /** Where the role's work is done; null when there is no page for it. */
  href: string | null;
  /** 'Director of Larkwater'. */
  label: string;
}

/** One organization somebody belongs to. */
export interface Belonging {
  slug: string;
  name: string;
  isSuspended: boolean;
  places: Place[];
}

/** An invitation waiting for this person. */
export interface OpenInvitation {
  id: string;
  organization: string;
  /** 'Director of Larkwater'. */
  label: string;
  href: string;
  /** 'Sat 13 Mar', on the organization's calendar. */
  until: string;
}
