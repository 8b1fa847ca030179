import type { ChoiceView, ChooseInput, LineMatchInput } from '../schemas/tariff';
import type { WhyView } from '../schemas/tariff-why';
import { call } from './api';

const root = (code: string) => `/api/engagements/${encodeURIComponent(code)}/tariff`;

/** Chooses the schedule of an engagement. */
export const chooseSchedule = (code: string, input: ChooseInput) => call<ChoiceView>('PUT', root(code), input);

/** Remembers which line of the schedule a printed label means. */
export const matchLine = (code: string, input: LineMatchInput) =>
  call<ChoiceView>('PUT', `${root(code)}/matches`, input);

/** What stands behind a figure of the sheet. */
export const askWhy = (code: string, billId: number, figure: string) =>
  call<WhyView>('GET', `${root(code)}/why?bill=${billId}&figure=${encodeURIComponent(figure)}`);
