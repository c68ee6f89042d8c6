package main

import (
	"fmt"
	"slices"
	"strings"

	"github.com/urfave/cli/v2"

	"lobewright/synth"
	"lobewright/synth/spec"
)

// The scripts are made from the commands and flags themselves, and are plain: they ask the
// program nothing when a key is pressed.

func completionCommand() *cli.Command {
	return &cli.Command{
		Name:  "completion",
		Usage: "print a script that completes commands and flags in a shell",
		UsageText: "lobewright completion bash|zsh|fish\n\nExamples:\n   lobewright completion bash > ~/.local/share/bash-completion/completions/lobewright\n" +
			"   lobewright completion fish > ~/.config/fish/completions/lobewright.fish",
		Action: func(c *cli.Context) error {
			shells := map[string]func([]offer) string{"bash": bashScript, "zsh": zshScript, "fish": fishScript}
			words := []string{"bash", "zsh", "fish"}
			if c.NArg() != 1 || shells[c.Args().First()] == nil {
				return failure{statusInput, fmt.Errorf("lobewright completion: found %q; allowed: one of %s%s", strings.Join(c.Args().Slice(), " "),
					strings.Join(words, ", "), nearest(c.Args().First(), words))}
			}
			fmt.Fprint(c.App.Writer, shells[c.Args().First()](offers(c.App)))
			return nil
		},
	}
}

// offer is a command with what may follow it.
type offer struct {
	name, usage string
	flags       []flagOffer
	words       []string // what may stand as its argument; files when there are none
}

type flagOffer struct {
	name, usage string // with its dashes
	takes       bool   // a value
	values      []string
}

// offers lists the commands of the program in their order.
func offers(app *cli.App) []offer {
	words := map[string][]string{"completion": {"bash", "zsh", "fish"}}
	for _, kind := range synth.Vocabulary().Cams {
		if _, err := spec.Starter(kind); err == nil {
			words["new"] = append(words["new"], kind)
		}
	}
	values := map[string][]string{"--dxf": {"2000", "r12"}, "--sheet": {"A4", "A3", "Letter"}}
	var all []offer
	for _, c := range app.Commands {
		o := offer{name: c.Name, usage: c.Usage, words: words[c.Name]}
		for _, f := range c.Flags {
			name := dashed(f.Names()[0])
			if name == "--help" {
				continue
			}
			_, isBool := f.(*cli.BoolFlag)
			usage := ""
			if d, ok := f.(cli.DocGenerationFlag); ok {
				usage = d.GetUsage()
			}
			o.flags = append(o.flags, flagOffer{name, usage, !isBool, values[name]})
		}
		o.flags = append(o.flags, flagOffer{name: "--help", usage: "show help"})
		all = append(all, o)
	}
	return all
}

func commandNames(all []offer) string {
	var names []string
	for _, o := range all {
		names = append(names, o.name)
	}
	return strings.Join(names, " ")
}

func (o offer) flagNames() string {
	var names []string
	for _, f := range o.flags {
		names = append(names, f.name)
	}
	return strings.Join(names, " ")
}

func bashScript(all []offer) string {
	var b strings.Builder
	b.WriteString("# bash completion of lobewright\n_lobewright() {\n  local cur=${COMP_WORDS[COMP_CWORD]} last=${COMP_WORDS[COMP_CWORD-1]} flags='' words=''\n  COMPREPLY=()\n")
	fmt.Fprintf(&b, "  if [ \"$COMP_CWORD\" -eq 1 ]; then\n    COMPREPLY=($(compgen -W '%s --help --version' -- \"$cur\"))\n    return\n  fi\n", commandNames(all))
	b.WriteString("  case $last in\n")
	var seen []string
	for _, o := range all {
		for _, f := range o.flags {
			if len(f.values) > 0 && !slices.Contains(seen, f.name) {
				seen = append(seen, f.name)
				fmt.Fprintf(&b, "    %s) COMPREPLY=($(compgen -W '%s' -- \"$cur\")); return ;;\n", f.name, strings.Join(f.values, " "))
			}
		}
	}
	b.WriteString("    -o) COMPREPLY=($(compgen -d -- \"$cur\")); return ;;\n  esac\n  case ${COMP_WORDS[1]} in\n")
	for _, o := range all {
		fmt.Fprintf(&b, "    %s) flags='%s' words='%s' ;;\n", o.name, o.flagNames(), strings.Join(o.words, " "))
	}
	b.WriteString("  esac\n  if [[ $cur == -* ]]; then\n    COMPREPLY=($(compgen -W \"$flags\" -- \"$cur\"))\n  elif [ -n \"$words\" ]; then\n" +
		"    COMPREPLY=($(compgen -W \"$words\" -- \"$cur\"))\n  else\n    COMPREPLY=($(compgen -f -- \"$cur\"))\n  fi\n}\ncomplete -o filenames -F _lobewright lobewright\n")
	return b.String()
}

// quoted is a text between single quotes for a shell, without what zsh reads in descriptions.
func quoted(s string) string {
	return "'" + strings.NewReplacer("'", "", "[", "(", "]", ")", ":", ",").Replace(s) + "'"
}

func zshScript(all []offer) string {
	var b strings.Builder
	b.WriteString("#compdef lobewright\n# zsh completion of lobewright\n_lobewright() {\n  if (( CURRENT == 2 )); then\n    local -a commands=(\n")
	for _, o := range all {
		fmt.Fprintf(&b, "      %s\n", strings.Replace(quoted(o.name+"\x00"+o.usage), "\x00", ":", 1))
	}
	b.WriteString("    )\n    _describe command commands\n    return\n  fi\n  local command=$words[2]\n  shift words\n  (( CURRENT-- ))\n  case $command in\n")
	for _, o := range all {
		fmt.Fprintf(&b, "    %s) _arguments", o.name)
		for _, f := range o.flags {
			value := ""
			switch {
			case len(f.values) > 0:
				value = ":value:(" + strings.Join(f.values, " ") + ")"
			case f.name == "-o":
				value = ":folder:_files -/"
			case f.takes:
				value = ":value:"
			}
			fmt.Fprintf(&b, " \\\n      '%s[%s]%s'", f.name, strings.Trim(quoted(f.usage), "'"), value)
		}
		if len(o.words) > 0 {
			fmt.Fprintf(&b, " \\\n      '1:what:(%s)'", strings.Join(o.words, " "))
		} else {
			b.WriteString(" \\\n      '*:file:_files'")
		}
		b.WriteString(" ;;\n")
	}
	b.WriteString("  esac\n}\nif [ \"$funcstack[1]\" = _lobewright ]; then\n  _lobewright \"$@\"\nelse\n  compdef _lobewright lobewright\nfi\n")
	return b.String()
}

func fishScript(all []offer) string {
	var b strings.Builder
	b.WriteString("# fish completion of lobewright\n")
	for _, o := range all {
		fmt.Fprintf(&b, "complete -c lobewright -n __fish_use_subcommand -f -a %s -d %s\n", o.name, quoted(o.usage))
	}
	for _, o := range all {
		in := fmt.Sprintf("complete -c lobewright -n '__fish_seen_subcommand_from %s'", o.name)
		for _, f := range o.flags {
			flag := "-l " + strings.TrimPrefix(f.name, "--")
			if !strings.HasPrefix(f.name, "--") {
				flag = "-s " + strings.TrimPrefix(f.name, "-")
			}
			switch {
			case len(f.values) > 0:
				flag += " -x -a " + quoted(strings.Join(f.values, " "))
			case f.takes:
				flag += " -r"
			}
			fmt.Fprintf(&b, "%s %s -d %s\n", in, flag, quoted(f.usage))
		}
		if len(o.words) > 0 {
			fmt.Fprintf(&b, "%s -f -a %s\n", in, quoted(strings.Join(o.words, " ")))
		}
	}
	return b.String()
}
