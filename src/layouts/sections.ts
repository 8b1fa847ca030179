/** Where a staff page belongs among the global links. */
export type StaffSection =
  'today' | 'engagements' | 'clients' | 'schedules' | 'practice' | 'people' | 'trail' | 'profile';

export interface SectionLink {
  id: StaffSection;
  label: string;
}

const everybody: SectionLink[] = [
  { id: 'today', label: 'Today' },
  { id: 'engagements', label: 'Engagements' },
  { id: 'clients', label: 'Clients' },
  { id: 'schedules', label: 'Schedules' },
];

const partnerOnly: SectionLink[] = [
  { id: 'practice', label: 'Practice' },
  { id: 'people', label: 'People and rates' },
  { id: 'trail', label: 'Trail' },
];

/** Global links of a role, in two groups; the second is empty for a consultant. The address of each is `/id`. */
export function sectionLinks(role: string): { shared: SectionLink[]; partner: SectionLink[] } {
  return { shared: everybody, partner: role === 'partner' ? partnerOnly : [] };
}
