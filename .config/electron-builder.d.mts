import type { Configuration } from 'electron-builder';

/** Names of the built files that a worker needs, itself among them. */
export function filesOfWorkers(folder?: string): string[];
/** Bytes of the app's own part in a package's folder of resources. */
export function ownSize(resources: string): number;
declare const configuration: Configuration;
export default configuration;
