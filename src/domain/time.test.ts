import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { counted, dayOf, formatDay, formatMoment, formatShortDay, formatTime, formatWall, isWallTime, momentAt, wallMinutes, wallTimeOf } from './time';

describe('wall times', () => {
  test('noon and midnight on a twelve-hour clock (common practice, no published source)', () => {
    expect(formatWall('00:00')).toBe('12:00 am');
    expect(formatWall('12:00')).toBe('12:00 pm');
    expect(formatWall('12:00', true)).toBe('12 pm');
    expect(formatWall('08:00', true)).toBe('8 am');
    expect(formatWall('15:42')).toBe('3:42 pm');
    expect(formatWall('nonsense')).toBe('nonsense');
  });
  test('only 00:00 to 23:59', () => {
    for (const bad of ['24:00', '8:00', '08:60', '', '08:00:00']) expect(isWallTime(bad)).toBe(false);
    expect(wallMinutes('23:59')).toBe(1439);
    expect(wallMinutes('x')).toBeNaN();
  });
});

describe('moments in a zone', () => {
  test('the same moment on two sides of a date', () => {
    const moment = new Date('2027-03-13T20:42:00Z');
    expect(formatTime(moment, 'America/Chicago')).toBe('2:42 pm');
    expect(formatMoment(moment, 'America/Chicago')).toBe('Sat 13 Mar, 2:42 pm');
    expect(dayOf(moment, 'Pacific/Auckland')).toBe('2027-03-14');
  });
  test('days in words', () => {
    expect(formatDay('2027-03-13')).toBe('Saturday 13 March 2027');
    expect(formatDay('2027-03-13', { year: false })).toBe('Saturday 13 March');
    expect(formatShortDay('2027-03-13')).toBe('Sat 13 Mar');
  });
  // IANA time zone database: America/Chicago goes forward at 02:00 on the second Sunday of March, back at 02:00 on the first of November.
  test('the day the clocks change', () => {
    expect(momentAt('2027-03-14', '01:30', 'America/Chicago').toISOString()).toBe('2027-03-14T07:30:00.000Z');
    expect(momentAt('2027-03-14', '03:30', 'America/Chicago').toISOString()).toBe('2027-03-14T08:30:00.000Z');
    expect(momentAt('2027-03-14', '02:30', 'America/Chicago').toISOString()).toBe('2027-03-14T08:30:00.000Z');
    expect(momentAt('2027-11-07', '01:30', 'America/Chicago').toISOString()).toBe('2027-11-07T06:30:00.000Z');
    expect(momentAt('2027-11-07', '08:00', 'America/Chicago').toISOString()).toBe('2027-11-07T14:00:00.000Z');
  });
  test('there and back, in any zone, on any day without a change', () => {
    const zones = ['UTC', 'America/Chicago', 'America/St_Johns', 'Asia/Kathmandu', 'Pacific/Chatham', 'Australia/Lord_Howe'];
    fc.assert(
      fc.property(fc.constantFrom(...zones), fc.integer({ min: 0, max: 364 }), fc.integer({ min: 180, max: 1439 }), (zone, d, minute) => {
        const day = new Date(Date.UTC(2027, 0, 1 + d)).toISOString().slice(0, 10);
        const wall = `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;
        const moment = momentAt(day, wall, zone);
        return dayOf(moment, zone) === day && wallTimeOf(moment, zone) === wall;
      }),
    );
  });
});

test('counting', () => {
  expect(counted(1, 'team')).toBe('1 team');
  expect(counted(0, 'team')).toBe('0 teams');
  expect(counted(1200, 'entry', 'entries')).toBe('1,200 entries');
});
