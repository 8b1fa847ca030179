export { normalStream, uniformStream } from './random';
export { appraise } from './appraise';
export type { Appraisal, Project } from './appraise';
export { ratesOfReturn } from './irr';
export { afterTax, cashFlow, escalatedSavings } from './cash-flow';
export type { CashFlowMonth, CashFlowYear } from './cash-flow';
export { sampleAppraisal } from './uncertainty';
export type { Quantiles, UncertainProject, UncertaintyResult } from './uncertainty';
