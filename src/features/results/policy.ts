import { createHash } from 'node:crypto';
import { counted } from '~/domain/time';
import type { EventWithField } from './assembly';
import type { Obstacle, ReleaseSnapshot } from './types';

/** What stands in the way of a release. Nothing does when every event is accepted and nothing in it is open. */
export function obstaclesTo(events: readonly EventWithField[]): Obstacle[] {
  if (events.length === 0) return [{ words: 'There are no events yet.', eventSlug: null }];
  return events.flatMap(({ event, field }): Obstacle[] => {
    const name = `${event.name}, ${event.division.name}`;
    if (field.rows.length === 0) return [{ words: `${name}: no team is entered in this division. Enter teams or remove the event.`, eventSlug: event.slug }];
    if (event.state === 'open') return [{ words: `${name} is not handed in.`, eventSlug: event.slug }];
    if (event.state === 'handed-in') return [{ words: `${name} is handed in and waits to be accepted.`, eventSlug: event.slug }];
    if (field.open.length > 0) return [{ words: `${name}: ${counted(field.open.length, 'team')} entered or changed since it was accepted ${field.open.length === 1 ? 'is' : 'are'} not settled. Take it back.`, eventSlug: event.slug }];
    return [];
  });
}

/** A short mark of a snapshot: says whether two people look at the same results. */
export function snapshotMark(snapshot: ReleaseSnapshot): string {
  return createHash('sha256').update(JSON.stringify(snapshot)).digest('base64url').slice(0, 32);
}
