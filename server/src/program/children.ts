import { memberPath } from './paths';
import type { Generic } from './values';

/** The paths by which a member can be reached: one for each name of its object. */
export function childNames(generic: Generic, key: string): string[] {
  return [generic.path, ...generic.aliases].map((path) => memberPath(path, key));
}
