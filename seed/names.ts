/** The invented people, schools and events of the demo. No real school, place, person or brand. */

/** The first 17 enter seniors, the others juniors. */
export const SCHOOLS: readonly { name: string; town: string }[] = [
  { name: 'Wrenfield Academy', town: 'Wrenfield' },
  { name: 'Ossler High', town: 'Ossler' },
  { name: 'Marrowgate High', town: 'Marrowgate' },
  { name: 'Lindle Prep', town: 'Lindle' },
  { name: 'Tarnbrook High', town: 'Tarnbrook' },
  { name: 'Cobble Hollow High', town: 'Cobble Hollow' },
  { name: 'Pellam High', town: 'Pellam' },
  { name: 'Quay Street High', town: 'Elmsquay' },
  { name: 'Elmsquay High', town: 'Elmsquay' },
  { name: 'Kestrel Row High', town: 'Saltmarrow' },
  { name: 'Mossgill High', town: 'Mossgill' },
  { name: 'Orrinfield High', town: 'Orrinfield' },
  { name: 'Rushwater High', town: 'Rushwater' },
  { name: 'Umberley Park High', town: 'Umberley' },
  { name: 'Wicketdale High', town: 'Wicketdale' },
  { name: 'Ashlar Point High', town: 'Ashlar' },
  { name: 'The Calverdene School of Science, Letters and Practical Arts', town: 'Calverdene' },
  { name: 'Brackenrow Middle', town: 'Brackenrow' },
  { name: 'Dunsallow Middle', town: 'Dunsallow' },
  { name: 'Farrowmoor Middle', town: 'Farrowmoor' },
  { name: 'Gantry Hill School', town: 'Gantry Hill' },
  { name: 'Hobbleton Prep', town: 'Hobbleton' },
  { name: 'Inglewick Middle', town: 'Inglewick' },
  { name: 'Jessamy Park School', town: 'Jessamy' },
  { name: 'Limeburn Middle', town: 'Limeburn' },
  { name: 'Netherquay School', town: 'Netherquay' },
  { name: 'Pinfold Lane Middle', town: 'Umberley' },
  { name: 'Quillbrook School', town: 'Quillbrook' },
  { name: 'Saltmarrow Middle', town: 'Saltmarrow' },
  { name: 'Thornlea Cross School', town: 'Thornlea' },
  { name: 'Vellum Street Middle', town: 'Ossler' },
  { name: 'Yarrowgate Middle', town: 'Yarrowgate' },
  { name: 'Zephyr Hill School', town: 'Zephyr Hill' },
  { name: 'Barleymow Middle', town: 'Barleymow' },
];

export interface DemoEvent {
  name: string;
  room: string;
  /** Which of the leaders has it. */
  leader: string;
  module: 'optics-shoot' | 'written-test';
  isTrial?: boolean;
}

/** Twelve events a division; the kinds that are there so far. */
export const EVENTS: readonly DemoEvent[] = [
  { name: 'Optics Shoot', room: 'Gym B', leader: 'wim', module: 'optics-shoot' },
  { name: 'Body Systems', room: 'Room 104', leader: 'petra', module: 'written-test' },
  { name: 'Pond Life', room: 'Room 106', leader: 'petra', module: 'written-test' },
  { name: 'Heat Loss', room: 'Lab 2', leader: 'sunil', module: 'written-test' },
  { name: 'Night Charts', room: 'Room 201', leader: 'sunil', module: 'written-test' },
  { name: 'Reaction Rate', room: 'Lab 1', leader: 'dela', module: 'written-test' },
  { name: 'Sound Pipes', room: 'Music room', leader: 'dela', module: 'written-test' },
  { name: 'Strata Walk', room: 'Room 112', leader: 'hollis', module: 'written-test' },
  { name: 'Weather Desk', room: 'Room 203', leader: 'hollis', module: 'written-test' },
  { name: 'Circuit Hunt', room: 'Shop 1', leader: 'bea', module: 'written-test' },
  { name: 'Seed Lines', room: 'Greenhouse', leader: 'bea', module: 'written-test' },
  { name: 'Signal Codes', room: 'Library', leader: 'bea', module: 'written-test', isTrial: true },
];

export const PEOPLE = {
  ilse: { name: 'Ilse Varden', email: 'ilse@thistlemoor.example', words: 'owner' },
  tobin: { name: 'Tobin Hale', email: 'tobin@thistlemoor.example', words: 'treasurer' },
  noor: { name: 'Noor Asante', email: 'noor@thistlemoor.example', words: 'director of both tournaments' },
  wim: { name: 'Wim Calder', email: 'wim@thistlemoor.example', words: 'event leader, Optics Shoot' },
  petra: { name: 'Petra Lundy', email: 'petra@thistlemoor.example', words: 'event leader, written tests' },
  sunil: { name: 'Sunil Brandt', email: 'sunil@thistlemoor.example', words: '' },
  dela: { name: 'Dela Okoro', email: 'dela@thistlemoor.example', words: '' },
  hollis: { name: 'Hollis Wray', email: 'hollis@thistlemoor.example', words: '' },
  bea: { name: 'Bea Tamsin', email: 'bea@thistlemoor.example', words: '' },
  juno: { name: 'Juno Pell', email: 'juno@thistlemoor.example', words: 'volunteer' },
  amara: { name: 'Amara Quist', email: 'amara@wrenfield.example', words: 'coach, Wrenfield Academy' },
  leif: { name: 'Leif Arden', email: 'leif@ossler.example', words: 'coach, Ossler High' },
  rafe: { name: 'Rafe Donnelby', email: 'rafe@ambermarsh.example', words: 'owner of Ambermarsh League' },
} as const satisfies Record<string, { name: string; email: string; words: string }>;
export type PersonKey = keyof typeof PEOPLE;

/** One for all, since every account of the demo is open to whoever started it. */
export const DEMO_PASSWORD = 'lantern-over-larkwater';
