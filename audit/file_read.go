package audit

import (
	"regexp"
	"strconv"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// top reads the whole file; false when it is not of this format.
func (r *reader) top(root *yaml.Node) bool {
	if root.Kind != yaml.MappingNode {
		r.bad(scope{}, root, "", "this is not an audit file, which begins with %q", "format: "+Format)
		return false
	}
	var s scope
	f := r.fields(s, root, "", "format", "title", "site", "report", "oil", "air", "heat", "energy", "axes", "duties", "circuits", "calendar", "site_check")
	r.misspelt = len(r.found) > 0
	if !r.format(f["format"].value, root) {
		return false
	}
	r.file.Title = r.text(s, f, "title")
	r.site(f["site"].value)
	r.issue(f["report"].value)
	r.energy(f["energy"].value)
	r.oil(f["oil"].value, root)
	r.air(f["air"].value)
	r.file.Heat = r.heat(scope{}, f["heat"].value)
	r.axisNames(f["axes"].value)
	r.blockIDs(f["circuits"].value)
	r.duties(f["duties"].value, root)
	r.circuits(f["circuits"].value, root)
	r.calendar(f["calendar"].value)
	r.weekAgainstYear()
	r.readings(f["site_check"].value)
	return true
}

var versionOf = regexp.MustCompile(`^barlitre/(\d{1,9})$`)

func (r *reader) format(n, root *yaml.Node) bool {
	if isNull(n) {
		r.bad(scope{}, root, "format", "is missing; begin the file with %q", "format: "+Format)
		return true
	}
	if n.Kind == yaml.ScalarNode && n.Value == Format {
		return true
	}
	if m := versionOf.FindStringSubmatch(n.Value); m != nil {
		if v, _ := strconv.Atoi(m[1]); v > 1 {
			r.bad(scope{}, n, "format", "%s is newer than %s, the newest that this program reads; use a newer program", n.Value, Format)
			return false
		}
	}
	r.bad(scope{}, n, "format", "is %q; this program reads %q", n.Value, Format)
	return false
}

var currencyCode = regexp.MustCompile(`^[A-Z]{3}$`)

func (r *reader) site(n *yaml.Node) {
	s := scope{where: "site"}.titled("site")
	f := r.fields(s, n, "", "name", "customer", "author", "date", "note", "currency")
	r.file.Site = Site{Name: r.text(s, f, "name"), Customer: r.text(s, f, "customer"), Author: r.text(s, f, "author"),
		Date: r.text(s, f, "date"), Note: r.text(s, f, "note")}
	if c := r.text(s, f, "currency"); currencyCode.MatchString(c) {
		r.file.Site.Currency = c
	} else if c != "" {
		r.bad(s, f["currency"].value, "currency", "is %q; write a code of three capital letters, such as EUR", c)
	}
}

func (r *reader) issue(n *yaml.Node) {
	s := scope{}.titled("").in("report").titled("report")
	f := r.fields(s, n, "", "owner", "number", "revision", "approved")
	r.file.Issue = Issue{Owner: r.text(s, f, "owner"), Number: r.text(s, f, "number"), Revision: r.text(s, f, "revision"), Approved: r.text(s, f, "approved")}
}

func (r *reader) air(n *yaml.Node) {
	s := scope{where: "air"}.titled("air")
	f := r.fields(s, n, "", "temperature")
	r.file.Air, r.file.HasAir = r.optional(s, f, "temperature", units.Temperature)
}

// optional reads a quantity if its key is there.
func (r *reader) optional(s scope, f map[string]entry, key string, d units.Dim) (circuit.Value, bool) {
	e, ok := f[key]
	if !ok {
		return circuit.Value{}, false
	}
	return r.value(s, e.value, key, d)
}

// positive is optional for what cannot be zero or less.
func (r *reader) positive(s scope, f map[string]entry, key string, d units.Dim) (circuit.Value, bool) {
	v, ok := r.optional(s, f, key, d)
	if ok && v.SI <= 0 {
		r.bad(s, f[key].value, key, "is %s, must be above 0", v.Text)
		return v, false
	}
	return v, ok
}

func (r *reader) energy(n *yaml.Node) {
	s := scope{where: "energy"}.titled("energy")
	f := r.fields(s, n, "", "price", "co2", "co2_year", "co2_basis", "credit_returned", "fuel_price", "fuel_co2", "fuel_density", "fuel_heating_value")
	a := r.file
	if a.Price, a.HasPrice = r.optional(s, f, "price", units.EnergyPrice); a.HasPrice {
		r.money(s, f["price"].value, "price", a.Price)
	}
	if a.CO2, a.HasCO2 = r.optional(s, f, "co2", units.CO2Factor); a.HasCO2 && a.CO2.SI < 0 {
		r.bad(s, f["co2"].value, "co2", "is %s, must not be below 0", a.CO2.Text)
	}
	a.CO2Year = r.number(s, f, "co2_year", 1990, 2100)
	a.CO2Basis = r.word(s, f, "co2_basis", "location", "market")
	a.CreditReturned = r.flag(s, f, "credit_returned", false)
	r.fuelKeys(s, f)
}

// money checks that all sums are in one currency: no rate of exchange is known.
// The first one read decides where the site names none.
func (r *reader) money(s scope, n *yaml.Node, key string, v circuit.Value) {
	code := v.Unit.Symbol[:min(3, len(v.Unit.Symbol))]
	site := &r.file.Site.Currency
	if *site == "" {
		*site = code
	}
	if code != *site {
		r.bad(s, n, key, "is in %s, the audit in %s; convert it, no rate of exchange is known here", code, *site)
	}
}

var axisKinds = []string{duty.Linear.String(), duty.Rotary.String()}

// axisNames reads the axes.
func (r *reader) axisNames(n *yaml.Node) {
	s := scope{where: "axes"}
	for _, e := range r.entries(s, n, "") {
		r.axes[e.key] = true
		if !r.id(s, e.at, "axis") {
			continue
		}
		a := duty.Axis{Name: e.key, Kind: duty.Linear}
		f, at, key := map[string]entry{e.key: e}, s, e.key
		if e.value.Kind == yaml.MappingNode {
			f, at, key = r.fields(s, e.value, e.key, "kind", "load"), s.in(e.key), "kind"
			a.Load = r.text(at, f, "load")
			if _, ok := f["kind"]; !ok {
				r.bad(at, e.at, "kind", "is missing; write linear or rotary")
			}
		}
		kind := r.word(at, f, key, axisKinds...)
		if kind == "" {
			r.file.unreadAxes = append(r.file.unreadAxes, e.key)
			continue
		}
		if kind == duty.Rotary.String() {
			a.Kind = duty.Rotary
		}
		r.file.Axes = append(r.file.Axes, a)
	}
}

var idText = regexp.MustCompile(`^[\pL\pN_]+$`)

// IsName reports whether a text may be the name of a block or an axis.
func IsName(text string) bool { return idText.MatchString(text) }

// id reports whether a name can stand in lines and tracks.
func (r *reader) id(s scope, n *yaml.Node, what string) bool {
	if !IsName(n.Value) {
		r.bad(s, n, "", "%s %q: use letters, digits and _ only", what, n.Value)
		return false
	}
	return true
}

// oneLine makes a name fit for messages and lists.
func oneLine(s string) string { return strings.Join(strings.Fields(s), " ") }
