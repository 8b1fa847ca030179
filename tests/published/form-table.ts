/** The published forms of rule by number, and the files that say them; the first is the form itself, others are further sheets of it. */
export const filesOfForm: Record<number, readonly [string, ...string[]]> = {
  1: ['kw-reference-over-pf'],
  2: ['kw-linear-below-reference', 'kw-linear-low-side-uplift'],
  3: ['kw-two-percent-per-point'],
  4: ['kw-over-pf-after-trigger'],
  5: ['percent-rational-curve'],
  6: ['percent-per-hundredth-two-slopes'],
  7: ['percent-per-hundredth'],
  8: ['percent-bonus-and-two-slopes'],
  9: ['percent-table-lead-and-lag'],
  10: ['base-charge-both-sides-of-85'],
  11: ['base-charge-small-steps'],
  12: ['percent-lookup-table'],
  13: ['percent-by-bands', 'percent-by-bands-after-grace'],
  14: ['percent-per-step-of-ratio'],
  15: ['surcharge-on-kva-charge'],
  16: ['kvar-over-share-of-kw', 'kvar-over-share-by-time-of-day', 'kvar-excess-ratchet'],
  17: ['kvar-lag-at-peak-lead-at-minimum'],
  18: ['kva-demand', 'kva-demand-from-kw'],
  19: ['kw-or-share-of-kva'],
  20: ['kvarh-share-of-kwh', 'kvarh-share-larger-sense', 'kvarh-over-tangent'],
  21: ['kvarh-price-by-pf-band'],
  22: ['kvarh-bands-by-window'],
  23: ['kvarh-daily-bands'],
  24: ['kvarh-winter-tangent'],
  25: ['kvarh-cliff'],
  26: ['hourly-rescaled-to-reference'],
  27: ['hourly-excess-escalating'],
  28: ['kvarh-dearer-by-months'],
  29: ['kwh-times-curve'],
  30: ['kwh-price-per-point'],
  31: ['kvar-below-free-region'],
  32: ['kvar-outside-permitted-range'],
};

/** Forms that no source was read for. */
export const fromMemory = ['kvar-lag-at-peak-lead-at-minimum', 'kwh-times-curve', 'kwh-price-per-point', 'kvah-energy'];

/** Files beside the numbered forms. */
export const unnumbered = ['kvah-energy'];

/** What a tariff language must be able to say: by wish, the words in which a form's file says it. */
export const wishes: { wish: string; saidBy: [form: string, words: RegExp][] }[] = [
  {
    wish: '1 quantities: kWh, kvarh in both senses, highest kW, kVA, kvar, kvar at the peak and at the minimum, by window, months, hour, day',
    saidBy: [
      ['kvarh-cliff', /drawn: \{ sum: kvarhLagging[^}]*\}\n {2}delivered: \{ sum: kvarhLeading/],
      ['kw-or-share-of-kva', /maxKw: \{ highest: kw,[^}]*\}\n {2}maxKva: \{ highest: kva,/],
      ['kvar-over-share-by-time-of-day', /maxKvar: \{ highest: kvarLagging/],
      ['kvar-over-share-of-kw', /kvarAtPeak: \{ value: kvarLagging, at: maxKw/],
      ['kvar-lag-at-peak-lead-at-minimum', /leadAtMin: \{ value: kvarLeading, at: minKw/],
      ['kvarh-bands-by-window', /kvarh: \{ sum: kvarhLagging, inEach: \[f1, f2, f3\]/],
      ['kvarh-winter-tangent', /winterTime: \{ season: winter/],
      ['hourly-excess-escalating', /each: hour/],
      ['kvarh-daily-bands', /each: day/],
    ],
  },
  {
    wish: '2 power factor of the month, at the peak, of an hour, of a day; lagging, of both senses, leading as unity; rounded by step and mode',
    saidBy: [
      ['kw-reference-over-pf', /pf: \{ formula: pf\(kwh; kvarh\), round: 0\.0001/],
      ['kvar-below-free-region', /pf\(maxKw; kvarAtPeak\)/],
      ['hourly-rescaled-to-reference', /pf\(kwh; kvarhLagging\); 1\)\n {4}each: hour/],
      ['kvarh-daily-bands', /between\(kvarhLagging; 0\.3 \* kwh; 0\.4 \* kwh\), each: day/],
      ['percent-table-lead-and-lag', /pf\(kwh; drawn \+ delivered\)/],
      ['percent-bonus-and-two-slopes', /pf\(kwh; excess\(drawn; delivered\)\)/],
      ['percent-per-step-of-ratio', /round: 1 half down/],
    ],
  },
  {
    wish: '3 adjusted demand: greater of kW and a share of kVA, reference over pf, a line in the shortfall, kW over pf after a trigger',
    saidBy: [
      ['kw-or-share-of-kva', /max\(maxKw; kvaShare \* maxKva\)/],
      ['kw-reference-over-pf', /maxKw \* max\(1; reference \/ pf\)/],
      ['kw-linear-below-reference', /maxKw \* \(1 \+ excess\(reference; pf\)\)/],
      ['kw-over-pf-after-trigger', /if\(cos < trigger; maxKw \/ cos; maxKw\)/],
    ],
  },
  {
    wish: '4 a percentage of named lines, signed, with slopes, jump, table, rational curve, cap and floor',
    saidBy: [
      ['percent-bonus-and-two-slopes', /tiers:\n[^]*rate: -0\.5/],
      ['percent-by-bands', /from: \{ 0\.95: 0, 0\.85: 10, 0\.75: 20 \}/],
      ['percent-lookup-table', /0\.61: 47\.54\n/],
      ['percent-rational-curve', /min\(120; 60 \* excess\(reference \/ pf; 1\)\)/],
      ['percent-per-step-of-ratio', /min\(ceiling; phase \* perStep \* steps\)/],
      ['base-charge-small-steps', /max\(60; 100 \* pf\(kwhDay; drawn\)\)/],
    ],
  },
  {
    wish: '5 an allowance as a share, a tangent of a power factor, with a fixed adder, with exported energy',
    saidBy: [
      ['kvarh-share-of-kwh', /excess\(kvarh; freeShare \* total\(kwh\)\)/],
      ['kvarh-over-tangent', /tanOf\(neutral\) \* kwh \+ exportShare \* exported/],
      ['kvarh-winter-tangent', /kvarh \+ lowSideAdder \* lowSide \* winterKwh/],
    ],
  },
  {
    wish: '6 beyond it one price, a price picked by band, marginal bands with factors, the whole quantity',
    saidBy: [
      ['kvarh-share-of-kwh', /per: excessKvarh, rate: 0\.0481/],
      ['kvarh-price-by-pf-band', /pick: cos\n/],
      ['kvarh-bands-by-window', /to: 0\.75 \* kwh/],
      ['kvarh-daily-bands', /0\.33 \* band1 \+ band2 \+ 3 \* band3/],
      ['kvarh-cliff', /if\(drawn > drawnLimit \* kwh; drawn; 0\)/],
    ],
  },
  {
    wish: '7 leading apart: own window, own allowance, own price even if 0, never netted',
    saidBy: [
      [
        'kvarh-price-by-pf-band',
        /excess\(kvarhLeading; freeLeading \* kwh\)\n {4}each: hour\n {4}in: p6[^]*per: leading, rate: 0\.00/,
      ],
      ['kvarh-cliff', /if\(delivered > deliveredLimit \* kwh; delivered; 0\)/],
      ['kvarh-daily-bands', /injected: \{ sum: kvarhLeading, in: vazio/],
      ['kvar-outside-permitted-range', /excess\(leadAtPeak; tanOf\(leadLimit\) \* kwAtPeak\)/],
    ],
  },
  {
    wish: '8 sums of positive parts over intervals, and the highest over intervals less the billed demand',
    saidBy: [
      ['hourly-excess-escalating', /sum: excess\(kvarhLagging; freeShare \* kwh\), each: hour/],
      ['hourly-rescaled-to-reference', /dre: \{ formula: excess\(max\(dayKw; nightKw\); billedKw\)/],
    ],
  },
  {
    wish: '9 a ratchet with share, look back, season and contract minimum, on kW, kVA or excess kvar; blocks as wide as the billed demand',
    saidBy: [
      ['kw-or-share-of-kva', /season: wholly winter/],
      ['base-charge-both-sides-of-85', /past: maxKw, take: highest, over: this and last 11 periods/],
      ['kvar-excess-ratchet', /past: excessKvar, take: highest/],
      ['hourly-rescaled-to-reference', /max\(maxKw; contractKw\)/],
      ['kw-two-percent-per-point', /to: 200 \* billedKw/],
    ],
  },
  {
    wish: '10 months remembered: escalating factor, days of grace, yearly waiver, dated parameters, phases',
    saidBy: [
      ['hourly-excess-escalating', /take: streak/],
      ['kvarh-dearer-by-months', /pick: run, from: \{ 25: 1\.5, 13: 1\.25 \}/],
      ['percent-by-bands-after-grace', /daysSince\(connectedOn\) >= graceDays/],
      ['kvarh-cliff', /past: fault, take: sum, over: earlier periods of this year/],
      ['percent-rational-curve', /2024-01-01:\n {4}note: Reference 0\.95/],
      ['percent-per-step-of-ratio', /2025-05-01:\n {4}note: Second phase\n {4}rates: \{ phase: 0\.60 \}/],
    ],
  },
  {
    wish: '11 order and rounding of lines, percent of sums, taxes after, minimum, late payment, uplift for losses',
    saidBy: [
      ['percent-rational-curve', /tax: \{ percentOf: all above, rate: 15/],
      ['percent-per-hundredth', /rounding: 1\n/],
      ['kw-linear-low-side-uplift', /topUp: \[demand\], to: 750\.00/],
      ['kw-linear-low-side-uplift', /kwh \* \(1 \+ lossShare \* lowSide\)/],
      ['kvar-over-share-by-time-of-day', /topUp: \[onPeakDemand, partialDemand\]\n {4}to: leastShare \* yearDemand/],
      ['kw-two-percent-per-point', /rate: 10, when: paidLate = 1/],
    ],
  },
  {
    wish: '12 what holds without kWh',
    saidBy: [
      ['kw-reference-over-pf', /zeroKwh: \{ pf: 1 \}/],
      ['base-charge-both-sides-of-85', /zeroKwh: \{ pf: 0\.85 \}/],
      ['kvarh-winter-tangent', /zeroKwh: \{ ratio: 1 \}/],
      ['kwh-times-curve', /when: kwh = 0/],
    ],
  },
];
