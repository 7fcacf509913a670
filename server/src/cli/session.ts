import { createDiskFiles, type DiskFiles } from '../host/files';
import type { FoundSettings } from '../host/settings-files';
import type { Service } from '../service/api';
import { handlesFile } from '../service/handles';
import { findInputs, type Inputs } from './inputs';
import { UsageError, type Io } from './io';

/** A service over the files on disk, with what the given paths name. */
export interface Session {
  /** Loads what checks; not needed where nothing is declared or all is known. */
  service(): Promise<Service>;
  readonly disk: DiskFiles;
  /** Looked for anew at each call. */
  inputs(): Inputs;
  /** The settings of the folder that the command runs in: those that are about the whole run. */
  settings(): FoundSettings;
}

export function openSession(paths: readonly string[], io: Io): Session {
  let projects: readonly string[] = [];
  const disk = createDiskFiles(() => projects, handlesFile);
  let made: Promise<Service> | undefined;
  return {
    service: () => (made ??= import('../service/index').then((m) => m.createService(disk))),
    disk,
    inputs() {
      const found = findInputs(paths, io.folder, handlesFile);
      projects = found.projects;
      return withoutLeftOut(found, disk);
    },
    settings: () => sound(disk.settingsFiles.ofFolder(io.folder)),
  };
}

/** What the configuration takes out: told where a file was named, passed over where it was found. */
function withoutLeftOut(inputs: Inputs, disk: DiskFiles): Inputs {
  const skipped = [...inputs.skipped];
  const files = inputs.files.filter((file) => {
    sound(disk.settingsFiles.ofFile(file));
    const reason = disk.settingsFiles.reasonToSkip(file);
    if (reason !== undefined && inputs.named.has(file)) skipped.push({ file, reason });
    return reason === undefined;
  });
  return { ...inputs, files, skipped };
}

/** @throws UsageError for a configuration with faults: to go on would be to check something else than was meant */
function sound(found: FoundSettings): FoundSettings {
  if (found.faults.length > 0) throw new UsageError(`${found.file!}: ${found.faults.join('; ')}.`);
  return found;
}
