export { Line, type Call, type LineOptions } from './line.ts';
export { limits } from './limits.ts';
export { payloads } from './payloads.ts';
export { faultLine, faultLog } from './faults.ts';
export { refusals } from './sentences.ts';
export {
  pack,
  secretPrefix,
  unpack,
  wireProtocol,
  type FromWindow,
  type ToWindow,
} from './wire.ts';
