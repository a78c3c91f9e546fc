import type { DivisionRow } from '../tournaments/types';

/** An event of one division as the staff pages use it. */
export interface EventRow {
  id: string;
  tournamentId: string;
  slug: string;
  name: string;
  moduleKey: string;
  isTrial: boolean;
  room: string;
  state: 'open' | 'handed-in' | 'accepted';
  setup: unknown;
  setupVersion: number;
  setupLockedAt: Date | null;
  handedInAt: Date | null;
  acceptedAt: Date | null;
  division: DivisionRow;
  /** Names of its leaders. */
  leaders: { personId: string; name: string }[];
}
