/** A school as the office's list shows it. */
export interface SchoolRow {
  id: string;
  name: string;
  town: string;
  teams: number;
  coaches: number;
}
