import type { Command, Option } from 'commander';
import { UsageError, type Io, type Status } from './io';

const SHELLS = ['bash', 'zsh', 'fish'] as const;

/** Defines `visviva completions`: what a shell offers, made from the commands themselves. */
export function addCompletions(program: Command, io: Io, finish: (status: Status) => void): void {
  program
    .command('completions')
    .description('print what a shell needs to complete this command')
    .argument('<shell>', SHELLS.join(', '))
    .addHelpText('after', '\nbash: visviva completions bash > ~/.local/share/bash-completion/completions/visviva\nzsh:  visviva completions zsh > _visviva, in a folder of $fpath\nfish: visviva completions fish > ~/.config/fish/completions/visviva.fish')
    .action((shell: string) => {
      const commands = program.commands.map((c) => ({ name: c.name(), about: c.description(), options: c.options.filter((o) => o.long) }));
      if (shell === 'bash' || shell === 'zsh') io.out(`${shell === 'zsh' ? '#compdef visviva\nautoload -U +X bashcompinit && bashcompinit\n' : ''}${bash(commands)}`);
      else if (shell === 'fish') io.out(fish(commands));
      else throw new UsageError(`There are no completions for "${shell}". The shells are: ${SHELLS.join(', ')}.`);
      finish(0);
    });
}

interface Entry {
  readonly name: string;
  readonly about: string;
  readonly options: readonly Option[];
}

function bash(commands: readonly Entry[]): string {
  const cases = commands.map((c) => `    ${c.name}) words="${c.options.map((o) => o.long).join(' ')}" ;;`);
  return `_visviva() {
  local word="\${COMP_WORDS[COMP_CWORD]}" words=""
  if [ "$COMP_CWORD" -eq 1 ]; then
    COMPREPLY=($(compgen -W "${commands.map((c) => c.name).join(' ')}" -- "$word"))
    return
  fi
  case "\${COMP_WORDS[1]}" in
${cases.join('\n')}
  esac
  case "$word" in
    -*) COMPREPLY=($(compgen -W "$words" -- "$word")) ;;
    *) COMPREPLY=($(compgen -f -- "$word")) ;;
  esac
}
complete -o filenames -F _visviva visviva
`;
}

function fish(commands: readonly Entry[]): string {
  const quoted = (text: string) => `'${text.replace(/[\\']/g, '\\$&')}'`;
  const lines = commands.flatMap((c) => [
    `complete -c visviva -n __fish_use_subcommand -a ${c.name} -d ${quoted(c.about)}`,
    ...c.options.map((o) => `complete -c visviva -n '__fish_seen_subcommand_from ${c.name}' -l ${o.long!.slice(2)} -d ${quoted(o.description)}${o.required ? ' -r' : ''}`),
  ]);
  return `${lines.join('\n')}\n`;
}
