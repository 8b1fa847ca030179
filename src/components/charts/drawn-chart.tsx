import type { ReactElement } from 'react';
import { BillsBeforeAfterChart, type BillsBeforeAfterData } from './BillsBeforeAfterChart';
import { palettes, type PaletteName } from './palette';
import { PaybackChart } from './PaybackChart';
import type { PaybackData } from './payback';
import type { VCurveData } from './v-curve';
import { VCurveChart } from './VCurveChart';

interface Size {
  width: number;
  height: number;
  palette: PaletteName;
}

/** Charts that are also drawn outside a browser, with their properties as plain JSON. */
export interface ChartPropsByName {
  payback: PaybackData & Size;
  bills: BillsBeforeAfterData & Size;
  'v-curve': VCurveData & Size;
}

export type ChartName = keyof ChartPropsByName;

/** One chart to draw. */
export type ChartRequest = { [Name in ChartName]: { chart: Name; props: ChartPropsByName[Name] } }[ChartName];

/** The same component as on the pages, with a palette by its name. */
export function drawnChart(request: ChartRequest): ReactElement {
  const palette = palettes[request.props.palette];
  switch (request.chart) {
    case 'payback':
      return <PaybackChart {...request.props} palette={palette} />;
    case 'bills':
      return <BillsBeforeAfterChart {...request.props} palette={palette} />;
    case 'v-curve':
      return <VCurveChart {...request.props} palette={palette} />;
  }
}
