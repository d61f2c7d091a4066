package main

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestFixFirstCommand(t *testing.T) {
	var out, errs strings.Builder
	if code := run([]string{"fixfirst", "../samples/quayside-winch.yaml", "-set", "As found/RV1.crack=200 bar"}, &out, &errs); code != exitOK {
		t.Fatal(code, errs.String())
	}
	for _, want := range []string{"One fault was found", "RV1: relief at or below compensator", "Do: ", "Caution: ", "what Closed circuit adds", "Priced with: -set"} {
		if !strings.Contains(out.String(), want) {
			t.Errorf("%q is missing in\n%s", want, out.String())
		}
	}
	for _, bad := range [][]string{{"fixfirst"}, {"fixfirst", "none.yaml"}, {"fixfirst", "-units", "feet", "x.yaml"}, {"sitecheck"}, {"sitecheck", "none.yaml"}} {
		if code := run(bad, &out, &errs); code != exitUnreadable {
			t.Errorf("%v: code %d", bad, code)
		}
	}
}

// The audit's JSON holds the ladder, and its terms add up to the saving of the comparison.
func TestAuditTellsWhatToFixFirst(t *testing.T) {
	path := filepath.Join(t.TempDir(), "out.json")
	var out, errs strings.Builder
	if code := run([]string{"audit", "../samples/quayside-winch.yaml", "-set", "As found/RV1.crack=200 bar", "-json", path}, &out, &errs); code != exitOK {
		t.Fatal(code, errs.String())
	}
	if !strings.Contains(out.String(), "Fix first: As found") {
		t.Error("the text says nothing of what to fix first")
	}
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	type saving struct {
		KWh float64 `json:"kWh"`
	}
	var r struct {
		Comparisons []struct {
			Saved float64 `json:"kWh_saved"`
		} `json:"comparisons"`
		FixFirst []struct {
			Steps []struct {
				Rule    string `json:"rule"`
				InOrder saving `json:"in_order"`
			} `json:"steps"`
			Splits []struct {
				Architecture saving `json:"architecture"`
			} `json:"splits"`
		} `json:"fix_first"`
	}
	if err := json.Unmarshal(data, &r); err != nil {
		t.Fatal(err)
	}
	sum := r.FixFirst[0].Splits[0].Architecture.KWh
	for _, s := range r.FixFirst[0].Steps {
		sum += s.InOrder.KWh
	}
	if want := r.Comparisons[0].Saved; sum < want*(1-1e-6) || sum > want*(1+1e-6) || len(r.FixFirst[0].Steps) != 2 {
		t.Errorf("steps and proposal add up to %g kWh, the comparison saves %g kWh", sum, want)
	}
}

func TestSiteCheckCommand(t *testing.T) {
	data, err := os.ReadFile("../samples/quayside-winch.yaml")
	if err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "winch.yaml")
	read := "\nsite_check:\n  idling.M1.power: 24 kW\n  idling.P1.pressure: 186 bar\n  working.P1.pressure: 183 bar\n"
	if err := os.WriteFile(path, append(data, read...), 0o644); err != nil {
		t.Fatal(err)
	}
	var out, errs strings.Builder
	if code := run([]string{"sitecheck", path}, &out, &errs); code != exitOK {
		t.Fatal(code, errs.String())
	}
	for _, want := range []string{"test coupling at P1.P", "0 to 400", "Caution: Live work", "Most likely: RV1 set below the compensator of P1"} {
		if !strings.Contains(strings.Join(strings.Fields(out.String()), " "), want) {
			t.Errorf("%q is missing in\n%s", want, out.String())
		}
	}
}
