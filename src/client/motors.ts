import type { MotorInput, MotorView } from '../schemas/motor';
import { call } from './api';

/** Adds a motor. */
export const createMotor = (code: string, input: MotorInput) =>
  call<MotorView>('POST', `/api/engagements/${code}/motors`, input);

/** Changes a motor against the version seen. */
export const changeMotor = (id: number, version: number, input: MotorInput) =>
  call<MotorView>('PUT', `/api/motors/${id}`, { ...input, version });

/** Removes a motor no plan sets. */
export const removeMotor = (id: number, version: number) => call<void>('DELETE', `/api/motors/${id}`, { version });
