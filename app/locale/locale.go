// Package locale prepares the environment for the toolkit, whose start-up logs an error
// under the plain locales "C.UTF-8" and "POSIX.…". It imports nothing of the toolkit and
// its path sorts first, so that Go initializes it before (specification, "Program
// initialization").
package locale

import (
	"os"
	"strings"
)

func init() { plain() }

// plain cuts the encoding off a plain locale; the toolkit then takes English.
func plain() {
	for _, name := range []string{"LC_ALL", "LC_MESSAGES", "LANG"} { // the first that is set counts (POSIX, 8.2)
		value := os.Getenv(name)
		if value == "" {
			continue
		}
		if base, _, _ := strings.Cut(value, "."); base == "C" || base == "POSIX" {
			os.Setenv(name, base)
		}
		return
	}
}
