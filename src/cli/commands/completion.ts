/** `holdfast completion`: what a shell completes, written from the commands themselves. */
import { InputError, show } from '../../errors.ts';
import { type Command, Exit } from '../command.ts';

/** An option as the help page describes it. */
interface Described {
  readonly name: string;
  readonly about: string;
  /** `none` takes no value, `file` a path. */
  readonly value: 'none' | 'text' | 'file';
}

const SHELLS = { bash: bashScript, zsh: zshScript, fish: fishScript } as const;

/** @param commands all commands, this one included */
export function completionCommand(commands: () => readonly Command[]): Command {
  return {
    name: 'completion',
    summary: 'completion of commands and options for bash, zsh or fish',
    help: `holdfast completion bash|zsh|fish

Prints a script by which the shell completes commands, options and files.

  source <(holdfast completion bash)                                     in ~/.bashrc
  holdfast completion zsh > ~/.zfunc/_holdfast                           in a folder of $fpath
  holdfast completion fish > ~/.config/fish/completions/holdfast.fish

Exit status: 0 printed, 2 bad input.`,
    options: {},
    async run({ positionals, out }) {
      const [shell, another] = positionals;
      if (another !== undefined || shell === undefined || !Object.hasOwn(SHELLS, shell))
        throw new InputError('completion', 'one of bash, zsh, fish', show(another ?? shell));
      out(SHELLS[shell as keyof typeof SHELLS](commands()));
      return Exit.done;
    },
  };
}

/** The options of a command, and `--help`; what each does and takes is read from the command's help page. */
export function describedOptions({ options, help }: Command): Described[] {
  const own = Object.entries(options).map(([name, { type }]): Described => {
    const [, placeholder = '', about = ''] =
      new RegExp(`^ {2}--${name}(?: ([A-Z][^ ]*))? {2,}(.*)$`, 'm').exec(help) ?? [];
    const file = placeholder === 'FILE' || placeholder === 'DIR';
    return { name, about, value: type === 'boolean' ? 'none' : file ? 'file' : 'text' };
  });
  return [...own, { name: 'help', about: 'the page of the command', value: 'none' }];
}

function flags(options: readonly Described[]): string {
  return options.map((o) => `--${o.name}`).join(' ');
}

function bashScript(commands: readonly Command[]): string {
  const all = commands.map((c) => [c.name, describedOptions(c)] as const);
  const taking = (value: Described['value']) =>
    [
      ...new Set(
        all.flatMap(([, options]) => options.filter((o) => o.value === value).map((o) => `--${o.name}`)),
      ),
    ].join('|');
  return `# holdfast completion for bash
_holdfast() {
  local current=\${COMP_WORDS[COMP_CWORD]} previous=\${COMP_WORDS[COMP_CWORD - 1]} options=
  COMPREPLY=()
  if [ "$COMP_CWORD" -eq 1 ]; then
    COMPREPLY=($(compgen -W "${commands.map((c) => c.name).join(' ')} --help --version" -- "$current"))
    return
  fi
  case $previous in
    ${taking('text')}) return ;;
    ${taking('file')}) COMPREPLY=($(compgen -f -- "$current")); return ;;
  esac
  case \${COMP_WORDS[1]} in
${all.map(([name, options]) => `    ${name}) options="${flags(options)}" ;;`).join('\n')}
  esac
  case \${COMP_WORDS[1]} in
    completion) options="$options bash zsh fish" ;;
    check | cite) [[ $current == -* ]] || { COMPREPLY=($(compgen -f -- "$current")); return; } ;;
  esac
  COMPREPLY=($(compgen -W "$options" -- "$current"))
}
complete -o filenames -F _holdfast holdfast
`;
}

/** Inside single quotes of a shell. */
function quoted(text: string): string {
  return text.replaceAll("'", "'\\''");
}

function zshScript(commands: readonly Command[]): string {
  // A bracket would end a description, a colon the name in front of it.
  const plain = (text: string) => quoted(text.replace(/[[\]]/g, '').replaceAll(':', '\\:'));
  const cases = commands.map((c) => {
    const specs = describedOptions(c).map(({ name, about, value }) => {
      const action = value === 'none' ? '' : value === 'file' ? ':file:_files' : ':value:';
      return `        '${name === 'set' ? '*' : ''}--${name}[${plain(about)}]${action}'`;
    });
    const rest =
      c.name === 'completion'
        ? "'1:shell:(bash zsh fish)'"
        : c.name === 'check' || c.name === 'cite'
          ? "'1:file:_files'"
          : "'*::: :'";
    return `      ${c.name})\n        _arguments \\\n${specs.join(' \\\n')} \\\n        ${rest}\n        ;;`;
  });
  return `#compdef holdfast
_holdfast() {
  local -a commands
  commands=(
${commands.map((c) => `    '${c.name}:${plain(c.summary)}'`).join('\n')}
  )
  if (( CURRENT == 2 )); then
    _describe command commands
    return
  fi
  local command=$words[2]
  shift words
  (( CURRENT-- ))
  case $command in
${cases.join('\n')}
  esac
}
if [ "$funcstack[1]" = _holdfast ]; then _holdfast "$@"; else compdef _holdfast holdfast; fi
`;
}

function fishScript(commands: readonly Command[]): string {
  const lines = commands.flatMap((c) => [
    `complete -c holdfast -n __fish_use_subcommand -a ${c.name} -d '${quoted(c.summary)}'`,
    ...describedOptions(c).map(({ name, about, value }) => {
      const takes = value === 'none' ? '' : value === 'file' ? ' -r -F' : ' -x';
      return `complete -c holdfast -n '__fish_seen_subcommand_from ${c.name}' -l ${name}${takes} -d '${quoted(about)}'`;
    }),
  ]);
  return `# holdfast completion for fish
complete -c holdfast -f
${lines.join('\n')}
complete -c holdfast -n '__fish_seen_subcommand_from completion' -a 'bash zsh fish'
complete -c holdfast -n '__fish_seen_subcommand_from check cite' -F
`;
}
