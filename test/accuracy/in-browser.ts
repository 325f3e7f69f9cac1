import { value } from '../../worker/engine';
import { sharedRun } from './shared-run';
import { valuationBytes } from './valuation-bytes';

Object.assign(globalThis, { valued: () => valuationBytes(value(sharedRun())) });
