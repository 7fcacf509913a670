import { version as fromManifest } from '../../package.json';

/** The product's version, as the manifest states it. */
export const version: string = fromManifest;
