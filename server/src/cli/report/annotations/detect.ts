import { UsageError } from '../../io';
import type { Page, Writer } from '../page';
import { azureAnnotations } from './azure';
import { githubAnnotations } from './github';
import { teamcityAnnotations } from './teamcity';

/** By a variable that each system documents as set in its jobs. */
const systems: readonly (readonly [string, Writer])[] = [
  ['GITHUB_ACTIONS', githubAnnotations],
  ['TF_BUILD', azureAnnotations],
  ['TEAMCITY_VERSION', teamcityAnnotations],
];

/** Annotations for the system that the command runs on. */
export function annotations(page: Page): string | Promise<string> {
  const found = systems.find(([variable]) => page.environment[variable]);
  if (found) return found[1](page);
  throw new UsageError(
    `--format annotations knows the system it runs on by ${systems.map(([v]) => v).join(', ')}, and none is set here. Name the format instead: github, azure, teamcity or gitlab=FILE.`,
  );
}
