import type { Kernel } from './kernel.ts';
import { plainKernel } from './plain.ts';
import { webAssemblyKernel } from './webassembly.ts';

/** The kernel that fits are made with: SIMD where there is any; the bits are the same. */
export const defaultKernel: Kernel = webAssemblyKernel() ?? plainKernel;
