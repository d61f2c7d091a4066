package locale

import (
	"os"
	"testing"
)

func TestPlain(t *testing.T) {
	for _, c := range []struct{ all, lang, wantAll, wantLang string }{
		{"", "C.UTF-8", "", "C"},
		{"C.utf8", "de_DE.UTF-8", "C", "de_DE.UTF-8"},
		{"", "de_DE.UTF-8", "", "de_DE.UTF-8"},
		{"fr_FR.UTF-8", "C.UTF-8", "fr_FR.UTF-8", "C.UTF-8"},
		{"", "", "", ""},
	} {
		t.Setenv("LC_ALL", c.all)
		t.Setenv("LC_MESSAGES", "")
		t.Setenv("LANG", c.lang)
		plain()
		if all, lang := os.Getenv("LC_ALL"), os.Getenv("LANG"); all != c.wantAll || lang != c.wantLang {
			t.Errorf("LC_ALL=%q LANG=%q became %q and %q", c.all, c.lang, all, lang)
		}
	}
}
