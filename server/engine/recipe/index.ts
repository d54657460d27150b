/** The catalogue of recipe steps. Adding one: its file, its schema in the contract, and a line here. */
import { cast } from './cast.ts';
import { centre } from './centre.ts';
import { order } from './order.ts';
import { select } from './select.ts';
import { split } from './split.ts';
import type { Step } from './step.ts';
import { weigh } from './weigh.ts';
import { window } from './window.ts';

export const steps = [select, order, window, centre, weigh, split, cast] as unknown as readonly Step[];
