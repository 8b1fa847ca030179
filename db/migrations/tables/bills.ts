import { date, flag, id, json, link, real, stamps, text, version, whole, type Columns } from './columns';

/** Bills as the utility issued them. */
export const billTables: Record<string, Columns> = {
  bills: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    intake_id: link('intakes', true, 'CASCADE'),
    period_from: date(),
    period_to: date(),
    quantities: json(),
    currency: text(),
    total_minor: whole(true),
    source_row: text(true),
    places: json(true),
    invoice: text(true),
    read_on: date(true),
    estimated: flag(false),
    joined_to_id: link('bills', true, 'SET NULL'),
    join_note: text(true),
    put_away_by_id: link('intakes', true, 'SET NULL'),
    ...version,
    ...stamps,
  },
  bill_lines: {
    ...id,
    bill_id: link('bills', false, 'CASCADE'),
    position: whole(),
    label: text(),
    amount_minor: whole(),
    quantity: real(true),
    unit: text(true),
    rate: real(true),
    ...stamps,
  },
};

export const billChecks: Record<string, string[]> = {
  bills: ['period_from < period_to'],
};
