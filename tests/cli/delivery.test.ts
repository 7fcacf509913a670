import { execFileSync, spawnSync } from 'node:child_process';
import { mkdirSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { packageCommand } from '../../scripts/package-command.mjs';
import { Folder, RIGHT, rope, WRONG } from './support/command';

const root = fileURLToPath(new URL('../..', import.meta.url));

describe('the command as a package', () => {
  it('is packed without scripts and dependencies, installed from its file without a network, and runs by its name', async () => {
    using f = new Folder({ 'work/rope.ts': rope(WRONG), 'work/package.json': '{ "name": "work", "private": true }' });
    const folder = join(f.path, 'package');
    await packageCommand(folder);
    const manifest = JSON.parse(readFileSync(join(folder, 'package.json'), 'utf8')) as Record<string, unknown>;
    expect(Object.keys(manifest)).not.toEqual(expect.arrayContaining(['scripts', 'dependencies', 'devDependencies']));
    const npm = (cwd: string, ...args: string[]) => execFileSync('npm', args, { cwd, encoding: 'utf8', shell: process.platform === 'win32', env: { ...process.env, npm_config_cache: join(f.path, 'cache'), npm_config_update_notifier: 'false' } });
    const [packed] = JSON.parse(npm(f.path, 'pack', './package', '--json')) as { filename: string; size: number; files: { path: string }[] }[];
    expect(packed!.size).toBeLessThan(8_000_000);
    expect(packed!.files.map((x) => x.path)).toEqual(expect.arrayContaining(['dist/visviva.mjs', 'LICENSE', 'visviva.schema.json']));
    expect(packed!.files.filter((x) => x.path.endsWith('.map') || x.path.includes('client'))).toEqual([]);
    const work = join(f.path, 'work');
    npm(work, 'install', '--offline', '--no-audit', '--no-fund', join(f.path, packed!.filename));
    const run = (...args: string[]) => spawnSync('npx', ['--no-install', 'visviva', ...args], { cwd: work, encoding: 'utf8', shell: process.platform === 'win32', env: { ...process.env, NO_COLOR: '1', XDG_CACHE_HOME: join(f.path, 'xdg') } });
    const wrong = run('check', 'rope.ts', '--format', 'text', '--format', 'html=report.html');
    expect(wrong.stdout).toContain('1 of 2 claims differs');
    expect(wrong.status).toBe(1);
    expect(readFileSync(join(work, 'report.html'), 'utf8')).toContain('class="math');
    f.write('work/rope.ts', rope(RIGHT));
    expect(run('check', 'rope.ts').status).toBe(0);
  });

  it('is told of alike by action, hook and completions', () => {
    using f = new Folder();
    const help = f.run('check', '--help').out;
    for (const file of ['action.yml', '.pre-commit-hooks.yaml', 'Containerfile']) {
      const text = readFileSync(join(root, file), 'utf8');
      for (const [option] of text.matchAll(/--(?:changed-since|format)\b/g)) expect(help).toContain(option);
      expect(text).toContain('visviva');
    }
    const bash = f.run('completions', 'bash').out;
    for (const option of help.match(/--[a-z-]{3,}/g)!.filter((o) => o !== '--help')) expect(bash).toContain(option);
    f.write('c.sh', `${bash}\nCOMP_WORDS=(visviva check --changed); COMP_CWORD=2; _visviva; echo "\${COMPREPLY[@]}"\n`);
    expect(execFileSync('bash', ['c.sh'], { cwd: f.path, encoding: 'utf8' }).trim()).toBe('--changed-since');
    expect(f.run('completions', 'fish').out).toContain("complete -c visviva -n '__fish_seen_subcommand_from check' -l baseline -d");
    expect(f.run('completions', 'poem').status).toBe(2);
  });
});

describe('existing build engines', () => {
  it('run the sample as tasks with inputs and outputs, in parts, and skip what did not change', () => {
    using f = new Folder();
    const sample = join(root, 'docs', 'samples', 'wireit');
    for (const name of readdirSync(sample)) if (statSync(join(sample, name)).isFile()) f.write(name, readFileSync(join(sample, name), 'utf8'));
    f.write('src/rope.ts', rope(RIGHT, 'one'));
    f.write('src/other.ts', rope(RIGHT, 'two'));
    mkdirSync(join(f.path, 'bin'));
    f.write('bin/visviva', `#!/bin/sh\nexec ${JSON.stringify(process.execPath)} ${JSON.stringify(join(root, 'dist/visviva.mjs'))} "$@"\n`);
    execFileSync('chmod', ['+x', join(f.path, 'bin/visviva')]);
    const run = () => {
      const env = { ...process.env, PATH: `${join(f.path, 'bin')}:${join(root, 'node_modules/.bin')}:${process.env['PATH']!}`, NO_COLOR: '1', WIREIT_LOGGER: 'simple', WIREIT_CACHE: 'local', XDG_CACHE_HOME: join(f.path, 'xdg') };
      const r = spawnSync('npm', ['run', 'physics'], { cwd: f.path, encoding: 'utf8', env });
      return { ...r, all: r.stdout + r.stderr };
    };
    const first = run();
    expect(first.status, first.all).toBe(0);
    expect(f.read('reports/physics.xml')).toContain('tests="4" failures="0"');
    const second = run();
    expect(second.status, second.all).toBe(0);
    expect(second.all).toMatch(/\[physics:1\] Already fresh/);
    f.write('src/rope.ts', rope(WRONG, 'one'));
    expect(run().status).not.toBe(0);
  });
});
