export { calibrate, type Calibration, type CalibrationOptions } from './calibrate';
export type { CalibratedHouse, PastDeal } from './fitted';
