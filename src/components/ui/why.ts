/** One line of reasoning: what, the working with the numbers put in, the result. */
export interface WhyStep {
  label: string;
  working?: string;
  result?: string;
  /** `picked`: the alternative that won; `equals`: a result, ruled above; `fault`: in madder. */
  kind?: 'plain' | 'picked' | 'equals' | 'fault';
  /** Sheet, row, clause of this line. */
  source?: string;
}

/** Plain JSON behind one figure: everything the why panel shows. */
export interface WhyContent {
  /** "Why 26,525.40 USD: billed demand, bill of Feb 2026". */
  title: string;
  steps: WhyStep[];
  clause?: { text: string; cite: string };
  causes?: { label: string; off: string; fits: boolean }[];
  source?: string;
  sourceHref?: string;
}
