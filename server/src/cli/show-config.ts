import { absolute, shown, toSlashes } from '../host/paths';
import { SettingsFiles, settingsFileNames } from '../host/settings-files';
import { statSync } from 'node:fs';
import { UsageError, type Io, type Status } from './io';

/** Prints the settings that hold for each path, and their file. */
export function showConfig(paths: readonly string[], io: Io): Status {
  const files = new SettingsFiles();
  for (const path of paths.length === 0 ? ['.'] : paths) {
    const full = toSlashes(absolute(path, io.folder));
    const stat = statSync(full, { throwIfNoEntry: false });
    if (!stat) throw new UsageError(`There is no file or folder "${path}". Paths are taken from ${io.folder}.`);
    const found = stat.isDirectory() ? files.ofFolder(full) : files.ofFile(full);
    const out = { for: shown(full, io.folder), from: found.file ?? null, settings: found.settings, ...leftOut(files, full, stat.isDirectory()) };
    io.out(`${JSON.stringify(out, null, 2)}\n`);
    if (found.faults.length > 0) throw new UsageError(`${found.file!}: ${found.faults.join('; ')}.`);
    if (!found.file) io.log(`No configuration holds for ${path}: none of ${settingsFileNames.join(', ')} above it has settings of Visviva.`);
  }
  return 0;
}

function leftOut(files: SettingsFiles, file: string, isFolder: boolean): object {
  const reason = isFolder ? undefined : files.reasonToSkip(file);
  return reason === undefined ? {} : { leftOut: reason };
}
