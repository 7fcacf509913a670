import { declarationMark, type ProjectSettings } from '@visviva/shared';
import type { Files } from '../service/api';
import { isSettingsFile, SettingsFiles } from './settings-files';
import { readMarkedFile, readTextFile } from './text-file';
import { walk } from './walk';

/** The files of some folders on disk, as the service asks for them, remembered until told that they changed. */
export interface DiskFiles extends Files {
  readonly settingsFiles: SettingsFiles;
  settings(file: string): ProjectSettings;
  isLeftOut(file: string): boolean;
  /** Call when a file was created, changed or deleted. */
  changed(file: string): void;
  /** Call when the set of folders has changed, or when nobody can tell what has. */
  reset(): void;
}

/** A project with more source files than this is not searched further for declarations. */
const searchLimit = 20_000;

export function createDiskFiles(folders: () => readonly string[], handles: (file: string) => boolean): DiskFiles {
  let declaring: Set<string> | undefined;
  const settingsFiles = new SettingsFiles();

  const declares = (file: string): boolean => {
    if (file.endsWith('.visviva')) return true;
    return 'text' in readMarkedFile(file, declarationMark);
  };

  return {
    settingsFiles,
    settings: (file) => settingsFiles.ofFile(file).settings,
    isLeftOut: (file) => settingsFiles.reasonToSkip(file) !== undefined,

    read(file) {
      const read = readTextFile(file);
      return 'text' in read ? read.text : undefined;
    },

    declarations() {
      if (!declaring) {
        declaring = new Set();
        for (const folder of folders()) {
          for (const file of walk(folder, handles, searchLimit).files) if (declares(file)) declaring.add(file);
        }
      }
      return [...declaring].sort();
    },

    changed(file) {
      if (isSettingsFile(file)) settingsFiles.reset();
      if (!declaring || !handles(file)) return;
      if (declares(file)) declaring.add(file);
      else declaring.delete(file);
    },

    reset() {
      settingsFiles.reset();
      declaring = undefined;
    },
  };
}
