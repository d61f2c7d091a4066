// Command barlitre audits oil-hydraulic circuits. Without a command it opens the
// window on a file, or on a sample; the commands work without a display.
package main

import (
	"os"

	_ "barlitre/app/locale" // before the toolkit starts
)

// version is that of the program.
const version = "0.2.0"

// openWindow is set by builds that have the window.
var openWindow func(path string) error

func main() {
	os.Exit(run(os.Args[1:], os.Stdout, os.Stderr))
}
