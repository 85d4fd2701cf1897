import type { Kernel } from './kernel.ts';
import { plainKernel } from './sweep.ts';

/** The kernel that fits are made with. */
export const defaultKernel: Kernel = plainKernel;
