/** A team as lists show it. */
export interface TeamRow {
  id: string;
  divisionId: string;
  schoolId: string;
  schoolName: string;
  number: number;
  name: string;
  state: 'waiting' | 'confirmed' | 'withdrawn';
}
