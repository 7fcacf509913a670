import { existsSync } from 'node:fs';
import { absolute, toSlashes } from '../host/paths';
import type { DerivedSystem } from '../service/api';
import { Budget } from '../text/budget';
import { openService } from './check';
import { UsageError, type Io, type Status } from './io';
import { harmless } from './report/width';

export const DERIVE_FORMS = ['text', 'tex', 'typescript', 'python'] as const;
export type DeriveForm = (typeof DERIVE_FORMS)[number];

const COMMENT_MARK: Record<DeriveForm, string> = { text: '', tex: '% ', typescript: '// ', python: '# ' };

/** Prints the derived equations of what a file declares. */
export async function derive(file: string, form: DeriveForm, system: string | undefined, io: Io): Promise<Status> {
  const { service, inputs } = await openService([file], io);
  const path = inputs.files[0];
  if (path === undefined || inputs.files.length > 1) {
    const why = inputs.files.length > 1 ? 'is a folder; name one file' : (inputs.skipped[0]?.reason ?? 'holds no source file');
    throw new UsageError(`"${file}": ${why}.`);
  }
  const all = await service.derive(path, form, new Budget({ milliseconds: 120_000 }));
  const wanted = system === undefined ? all : all.filter((d) => d.system === system);
  if (wanted.length === 0) {
    const known = all.map((d) => d.system).join(', ');
    io.log(
      all.length === 0
        ? `${file} declares no system.`
        : `${file} declares no system "${system!}", but ${known}.`,
    );
    return all.length === 0 ? 1 : 2;
  }
  io.out(wanted.map((d) => section(d, form)).join('\n'));
  return 0;
}

/**
 * Tells how declarations compare with those of another file, or with another one of the same file.
 * @returns 0 when all have the same equations of motion, else 1
 */
export async function deriveAgainst(file: string, against: string, system: string | undefined, io: Io): Promise<Status> {
  const isFile = existsSync(absolute(against, io.folder));
  const { service, inputs } = await openService(isFile ? [file, against] : [file], io);
  for (const path of isFile ? [file, against] : [file]) {
    const skipped = inputs.skipped.find((s) => s.file === toSlashes(absolute(path, io.folder)));
    if (skipped) throw new UsageError(`"${path}": ${skipped.reason}.`);
    if (!inputs.files.includes(toSlashes(absolute(path, io.folder)))) throw new UsageError(`"${path}" is a folder; name one file.`);
  }
  const full = (path: string) => toSlashes(absolute(path, io.folder));
  const target = isFile ? { file: full(against) } : { name: against };
  const result = await service.compare(full(file), target, system, new Budget({ milliseconds: 120_000 }));
  if ('failure' in result) throw new UsageError(`Nothing to compare: ${result.failure}.`);
  io.out(result.comparisons.map((c) => `${harmless(`${c.first} / ${c.second}`)}\n  ${c.text}\n`).join('\n'));
  return result.comparisons.every((c) => c.kind === 'same') ? 0 : 1;
}

function section(d: DerivedSystem, form: DeriveForm): string {
  const title = `${COMMENT_MARK[form]}${d.system}`;
  return `${harmless(title)}\n${d.text.replace(/\n*$/, '')}\n`;
}
