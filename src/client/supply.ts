import type { SupplyInput, SupplyView } from '../schemas/supply';
import { call } from './api';

/** Writes down the supply of a plant against the version seen. */
export const changeSupply = (code: string, version: number, supply: SupplyInput) =>
  call<SupplyView>('PUT', `/api/engagements/${code}/supply`, { version, supply });
