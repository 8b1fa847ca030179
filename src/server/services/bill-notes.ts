/** Notes of the bills, each with the names of the bills it stands on; one that stands on every bill without. */
export function notesOfBills(bills: readonly { name: string; notes: readonly string[] }[]): string[] {
  const names = new Map<string, string[]>();
  for (const { name, notes } of bills) {
    for (const note of notes) names.set(note, [...(names.get(note) ?? []), name]);
  }
  return [...names].map(([note, on]) => (on.length === bills.length ? note : `${on.join(', ')}: ${note}`));
}
