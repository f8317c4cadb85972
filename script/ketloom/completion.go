package main

import (
	"flag"
	"fmt"
	"os"
	"strings"

	"ketloom/script/manual"
)

// commands are the words that may follow ketloom.
var commands = []string{"run", "check", "new", "doc", "completion", "version", "help"}

// completion prints what a shell needs to complete command lines.
func completion(args []string) int {
	if wantsHelp(args) {
		return help([]string{"completion"})
	}
	if len(args) != 1 {
		fmt.Fprintln(os.Stderr, "ketloom: completion wants the name of a shell: bash, zsh or fish")
		return exitUsage
	}
	words, subjects, flags := strings.Join(commands, " "), strings.Join(subjects(), " "), strings.Join(flagNames(), " ")
	switch args[0] {
	case "bash":
		fmt.Printf(bashCompletion, words, subjects, flags)
	case "zsh":
		fmt.Printf(zshCompletion, words, subjects, flags)
	case "fish":
		fmt.Printf(fishCompletion, words, subjects)
		for _, name := range flagNames() {
			fmt.Printf("complete -c ketloom -n \"__fish_seen_subcommand_from run\" -o %s\n", name[1:])
		}
	default:
		fmt.Fprintf(os.Stderr, "ketloom: no completion for the shell %q; there is one for bash, zsh and fish\n", args[0])
		return exitUsage
	}
	return exitOK
}

// flagNames are the flags of ketloom run, with their dashes.
func flagNames() []string {
	var names []string
	set, _ := runSet(&runFlags{})
	set.VisitAll(func(f *flag.Flag) { names = append(names, "-"+f.Name) })
	return names
}

// subjects are the short names of the packages with pages.
func subjects() []string {
	var names []string
	for _, path := range manual.Packages() {
		names = append(names, path[strings.LastIndexByte(path, '/')+1:])
	}
	return names
}

const bashCompletion = `_ketloom() {
	local word=${COMP_WORDS[COMP_CWORD]}
	if [ "$COMP_CWORD" -eq 1 ]; then
		COMPREPLY=($(compgen -W "%s" -- "$word"))
		return
	fi
	case ${COMP_WORDS[1]} in
	doc) COMPREPLY=($(compgen -W "%s" -- "$word")) ;;
	run) COMPREPLY=($(compgen -W "%s" -- "$word") $(compgen -f -X '!*.go' -- "$word") $(compgen -d -- "$word")) ;;
	check) COMPREPLY=($(compgen -f -X '!*.go' -- "$word") $(compgen -d -- "$word")) ;;
	completion) COMPREPLY=($(compgen -W "bash zsh fish" -- "$word")) ;;
	esac
}
complete -o filenames -F _ketloom ketloom
`

const zshCompletion = `#compdef ketloom
_ketloom() {
	if (( CURRENT == 2 )); then
		compadd %s
		return
	fi
	case $words[2] in
	doc) compadd %s ;;
	run) [[ $PREFIX == -* ]] && compadd -- %s || _files -g '*.go' || _files -/ ;;
	check) _files -g '*.go' || _files -/ ;;
	completion) compadd bash zsh fish ;;
	esac
}
compdef _ketloom ketloom
`

const fishCompletion = `complete -c ketloom -f
complete -c ketloom -n __fish_use_subcommand -a "%s"
complete -c ketloom -n "__fish_seen_subcommand_from doc" -a "%s"
complete -c ketloom -n "__fish_seen_subcommand_from run check" -F
complete -c ketloom -n "__fish_seen_subcommand_from completion" -a "bash zsh fish"
`
