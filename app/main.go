// Command barlitre audits oil-hydraulic circuits. Without a command it opens the
// window; the commands work without a display.
package main

import (
	"os"
)

func main() {
	os.Exit(run(os.Args[1:], os.Stdout, os.Stderr))
}
