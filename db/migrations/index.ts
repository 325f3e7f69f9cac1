import { People1000000000001 } from './0001-people';
import { Data1000000000002 } from './0002-data';
import { Pricing1000000000003 } from './0003-pricing';
import { Quotes1000000000004 } from './0004-quotes';
import { RunBlocks1000000000005 } from './0005-run-blocks';

export const MIGRATIONS = [People1000000000001, Data1000000000002, Pricing1000000000003, Quotes1000000000004, RunBlocks1000000000005];
