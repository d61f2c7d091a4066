package main

import (
	"flag"
	"fmt"
	"io"
	"os"
	"slices"
	"strings"
)

// Exit codes, the same for all commands.
const (
	exitOK         = 0
	exitUnsolvable = 1 // a circuit cannot be solved
	exitUnreadable = 2 // a file cannot be read or written, or the call is wrong
	exitUnbalanced = 3 // a time step stayed unbalanced
)

// command is one thing the program does without a window.
type command struct {
	name, args, text string
	run              func(args []string, out, errs io.Writer) int
}

var commands = []command{
	{"check", "FILE...", "say whether the circuits of audit files can be solved, and what stands out", check},
	{"audit", "FILE... [-set [CIRCUIT/]BLOCK.PARAM=QUANTITY]... [-json OUT|-] [-csv DIR] [-pdf OUT [-sheets]] [-request OUT] [-units metric|us|si]", "balance the circuits and print their energy, heat and cost", auditFiles},
	{"fixfirst", "FILE... [-set ...] [-units metric|us|si]", "find what is wrong with the circuits as found, and what each cure is worth", fixFirst},
	{"sitecheck", "FILE... [-set ...] [-units metric|us|si]", "print what to measure at the machine, and what the readings in the file say", siteCheck},
	{"sheet", "FILE -pdf OUT [-circuit CIRCUIT]... [-duty DUTY] [-at TIME] [-paper A4|A3] [-cycle] [-hide SIGNS] [-units metric|us|si]", "print the circuits as they are drawn, with their results and a title block", printSheets},
	{"fit", "POINTS.csv [-displacement QUANTITY] [-viscosity QUANTITY] [-bulk QUANTITY] [-png DIR]", "fit the loss coefficients of a pump or motor to measured points", fit},
	{"import", "RECORDING.csv [-rows N] [-answer FIELD=CHOICE]... [-choose KEY=CHOICE]... [-rate EFFORT,FLOW] [-cycles CHANNEL,... [-held CHANNEL,...]] [-also FILE,... [-clock CHANNEL=CHANNEL|TIME]]... [-yaml]", "read the recording of a data logger: what it seems to be, what is wrong with it, whether it is fast enough, which cycles it holds", importFile},
	{"blocks", "[KIND]", "list the kinds of block, or all that is known of one", blocks},
}

// run carries out the command named by the first argument and returns the exit
// code. Without a command it opens the window, on the file named if there is one.
func run(args []string, out, errs io.Writer) int {
	if len(args) > 0 {
		if slices.Contains([]string{"-h", "-help", "--help", "help"}, args[0]) {
			usage(out)
			return exitOK
		}
		for _, c := range commands {
			if c.name == args[0] {
				return c.run(args[1:], out, errs)
			}
		}
	}
	path, isFile := "", len(args) == 0
	if len(args) == 1 {
		_, err := os.Stat(args[0])
		path, isFile = args[0], err == nil || strings.HasSuffix(args[0], ".yaml")
	}
	switch {
	case !isFile:
		fmt.Fprintf(errs, "barlitre: there is no command and no file %q\n\n", args[0])
	case openWindow == nil:
		fmt.Fprintln(errs, "barlitre: this build has no window; it has these commands:")
		fmt.Fprintln(errs)
	default:
		if err := openWindow(path); err != nil {
			fmt.Fprintln(errs, "barlitre:", err)
			return exitUnreadable
		}
		return exitOK
	}
	usage(errs)
	return exitUnreadable
}

func usage(w io.Writer) {
	fmt.Fprintln(w, "Barlitre balances oil-hydraulic circuits over a duty cycle and audits their energy.")
	fmt.Fprintln(w, "\n  barlitre [FILE]\n      open the window")
	for _, c := range commands {
		fmt.Fprintf(w, "  barlitre %s %s\n      %s\n", c.name, c.args, c.text)
	}
	fmt.Fprintln(w, "\nExit codes: 0 done; 1 a circuit cannot be solved; 2 a file cannot be read or written; 3 a time step stayed unbalanced.")
}

// parseMixed parses options that may stand before and after the names of files, and returns the names.
func parseMixed(f *flag.FlagSet, args []string) (files []string, err error) {
	for rest := args; len(rest) > 0; {
		if err := f.Parse(rest); err != nil {
			return files, err
		}
		if rest = f.Args(); len(rest) > 0 {
			files, rest = append(files, rest[0]), rest[1:]
		}
	}
	return files, nil
}
