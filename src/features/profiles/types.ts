import type { Line, SetupFinding } from '~/event-modules/contract';

/** Everything the set-up page shows. */
export interface SetupPage {
  event: { id: string; slug: string; name: string; moduleKey: string; kind: string; state: 'open' | 'handed-in' | 'accepted'; division: { name: string; letter: string; shape: 'round' | 'square' } };
  /** The kept set-up, or the kind's own start when nothing is kept yet. */
  setup: unknown;
  version: number;
  lockedAt: Date | null;
  lockedBy: string | null;
  findings: SetupFinding[];
  summary: Line[];
  tieBreak: string[];
  /** Readings kept for this event, whatever their part. */
  keptReadings: number;
  /** The same kind of event in the other divisions, whose set-up can be the start of this one. */
  siblings: { slug: string; label: string; setup: unknown }[];
  may: { edit: boolean; lock: boolean; unlock: boolean };
}
