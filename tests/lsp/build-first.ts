import { buildAll } from '../../scripts/build.mjs';

/** These suites run what is shipped, so it is built before them. */
export default async function setup(): Promise<void> {
  await buildAll();
}
