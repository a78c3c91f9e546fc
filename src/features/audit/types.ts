/** What narrows the audit trail; an empty text narrows nothing. */
export interface AuditFilter {
  person: string;
  kind: string;
  tournament: string;
  text: string;
  /** Calendar days in the organization's zone, both included. */
  from: string;
  to: string;
}

/** One row of the trail with the names that its ids stand for, as far as what they name is still there. */
export interface AuditRow {
  id: string;
  at: Date;
  actor: string | null;
  action: string;
  subjectType: string;
  subject: string | null;
  tournament: string | null;
  /** The team and the person that the detail names. */
  team: string | null;
  person: string | null;
  detail: Record<string, unknown>;
}

/** One entry in plain words. */
export interface AuditLine {
  id: string;
  at: Date;
  who: string;
  what: string;
  /** What changed, or what else belongs to it. */
  facts: string[];
  tournament: string | null;
}

/** Where the next page of the trail begins: after this entry. */
export interface AuditCursor {
  at: Date;
  id: string;
}
