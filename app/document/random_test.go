package document

import (
	"fmt"
	"math/rand/v2"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// drawn is a file with comments, c1 to c17, wherever an edit may meet them.
const drawnText = `format: barlitre/1
# c1 top
oil: {grade: ISO VG 46, temperature: 50 C} # c2
axes: {ram: linear, drum: rotary}
duties:
# c3 the shift
- name: shift
  hours: 3000 h # c4
  points:
    t: [0 s, 1 s, 4 s] # c5
    # c6 up and down
    ram.speed: [0 m/s, 0.1 m/s, -0.1 m/s]
    "ram.load [kN]": [5, 5, 5]
    V2.command: [0, 1, 0]
circuits:
# c7 what was found
- name: As found
  pump_at_rest: keep # c8
  blocks:
    # c9 the supply
    T1: {kind: tank, at: [0, 20]}
    M1: {kind: electric_motor, rated_power: 15 kW, efficiency: 0.92, at: [0, 10]} # c10 in M1
    P1:
      kind: pump # c11 in P1
      displacement: 45 cm3/rev
      at: [10, 10]
    # c12 valves
    RV1: {kind: relief, crack: 160 bar, at: [20, 14]}
    V1: {kind: valve, follows: ram, nominal_flow: 60 L/min, at: [20, 5]}

    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm}
  lines: # c13
  - M1.shaft - P1.shaft # c14 the shaft
  - T1.T - P1.S
  # c15 pressure
  - P1.P - RV1.P - V1.P
  - RV1.T - T1.T
  - 'V1.A - C1.A'
  - "V1.B - C1.B" # c16
  - T1.T - V1.T
- {name: Proposal, role: proposal, retrofit_cost: 9000 EUR, blocks: {T1: {kind: tank}, P1: {kind: pump, displacement: 45 cm3/rev}, F1: {kind: filter, nominal_flow: 60 L/min}, V2: {kind: valve, nominal_flow: 60 L/min}}, lines: [T1.T - P1.S, P1.P - F1.A, F1.B - V2.P]}
# c17 end
`

// player makes random edits.
type player struct {
	*testing.T
	d       *Document
	r       *rand.Rand
	deleted []string // pieces of text that an edit may take comments out of
}

func pick[T any](p *player, list []T) T {
	if len(list) == 0 {
		var none T
		return none
	}
	return list[p.r.IntN(len(list))]
}

func (p *player) place() [2]float64 {
	return [2]float64{float64(p.r.IntN(60)), float64(p.r.IntN(60))}
}

// ids chooses one to three blocks.
func (p *player) ids(e *audit.CircuitEntry) []string {
	var out []string
	for i := p.r.IntN(3); i >= 0; i-- {
		if b := pick(p, e.Blocks); b.ID != "" && !slices.Contains(out, b.ID) {
			out = append(out, b.ID)
		}
	}
	return out
}

func (p *player) port(e *audit.CircuitEntry) string {
	b := pick(p, e.Blocks)
	if k := circuit.KindNamed(b.Kind); k != nil {
		return b.ID + "." + pick(p, k.Ports).Name
	}
	return "X.P"
}

// edit makes one random edit.
func (p *player) edit() (what string, err error) {
	f := p.d.File()
	e := pick(p, f.Circuits)
	du := pick(p, f.Duties)
	name, dutyName, rows := e.Name, "none", 1
	if du != nil {
		dutyName, rows = du.Name, len(du.Time)
	}
	p.deleted = nil
	line := p.r.IntN(len(e.Lines) + 1)
	kind := pick(p, circuit.Catalog()).Name
	axis := pick(p, f.Axes)
	n := p.r.IntN(1000)
	if p.r.IntN(20) == 0 {
		return p.dutyEdit(f)
	}
	switch k := p.r.IntN(112); {
	case len(e.Blocks) > 10 || k < 12:
		ids := p.ids(&e)
		for _, id := range ids {
			p.deleted = append(p.deleted, blockText(string(f.Bytes()), name, id))
		}
		return fmt.Sprint("delete ", ids), p.d.Delete(name, k%2 == 0, ids...)
	case len(f.Circuits) > 3 || k < 13:
		p.deleted = append(p.deleted, circuitText(string(f.Bytes()), name))
		return "delete circuit", p.d.DeleteCircuit(name)
	case k < 26:
		_, err := p.d.AddBlock(name, kind, p.place())
		return "add " + kind, err
	case k < 46:
		a, b := p.port(&e), p.port(&e)
		return "connect " + a + " " + b, p.d.Connect(name, a, b)
	case k < 49:
		return "line", p.d.ConnectLine(name, p.port(&e), line)
	case k < 55:
		return "join", p.d.JoinLines(name, line, p.r.IntN(len(e.Lines)+1))
	case k < 57:
		_, err := p.d.AddJunction(name, line, p.place())
		return "junction", err
	case k < 61:
		return "disconnect", p.d.Disconnect(name, p.port(&e))
	case k < 62:
		return "delete line", p.d.DeleteLine(name, line)
	case k < 65:
		return "rename", p.d.Rename(name, pick(p, e.Blocks).ID, fmt.Sprintf("B%d", n))
	case k < 67:
		_, err := p.d.Duplicate(name, p.place(), p.ids(&e)...)
		return "duplicate", err
	case k < 70:
		text, err := f.Copy(name, p.ids(&e)...)
		if err == nil {
			_, err = p.d.Paste(pick(p, f.Circuits).Name, text, p.place())
		}
		return "paste", err
	case k < 74:
		return "rotate", p.d.Rotate(name, p.r.IntN(4), p.ids(&e)...)
	case k < 76:
		return "mirror", p.d.Mirror(name, p.ids(&e)...)
	case k < 79:
		return "move", p.d.MoveBy(name, p.place(), p.ids(&e)...)
	case k < 80:
		return "add circuit", p.d.AddCircuit(fmt.Sprintf("Sheet %d", n), audit.Proposal)
	case k < 81:
		return "copy circuit", p.d.CopyCircuit(name, fmt.Sprintf("Copy: %d", n))
	case k < 82:
		return "swap", p.d.SwapRoles(name, pick(p, f.Circuits).Name)
	case k < 83:
		return "rename circuit", p.d.RenameCircuit(name, fmt.Sprintf("Circuit, %d", n))
	case k < 84:
		return "add axis", p.d.AddAxis(fmt.Sprintf("axis%d", n%6), duty.AxisKind(n%2))
	case k < 85:
		return "rename axis", p.d.RenameAxis(axis.Name, fmt.Sprintf("axis%d", n%6))
	case k < 86:
		return "remove axis", p.d.RemoveAxis(axis.Name)
	case k < 87:
		return "add duty", p.d.AddDuty(fmt.Sprintf("duty %d", n%4), "10 s")
	case k < 89:
		return "add track", p.d.AddTrack(dutyName, axis.Name+"."+pick(p, []string{"speed", "load", "command", "flow"}), "")
	case k < 90:
		track := "t"
		if du != nil && len(du.Tracks) > 0 {
			x := pick(p, du.Tracks)
			track = x.Of + "." + x.What.String()
		}
		return "remove track", p.d.RemoveTrack(dutyName, track)
	case k < 92:
		return "add row", p.d.AddRow(dutyName, p.r.IntN(rows+1), map[string]string{"t": fmt.Sprintf("%d s", p.r.IntN(12))})
	case k < 93:
		return "remove row", p.d.RemoveRow(dutyName, p.r.IntN(rows))
	case k < 94:
		return "set duty", p.d.SetDuty(dutyName, "hours", fmt.Sprintf("%d h", n))
	case k < 95:
		return "phase", p.d.SetPhase(dutyName, fmt.Sprintf("phase %d", n%5), pick(p, []string{"", "1 s", "2 s"}))
	case k < 97:
		_, err := p.d.AddNote(name, fmt.Sprintf("note: %d, \"said\" #%d\nand more", n, n), p.place())
		return "add note", err
	case k < 98:
		return "delete note", p.d.DeleteNote(name, p.r.IntN(len(e.Notes)+1))
	case k < 99:
		_, err := p.d.AddGroup(name, fmt.Sprintf("[group] %d", n), p.ids(&e)...)
		return "group", err
	case k < 100:
		return "regroup", p.d.SetGroup(name, p.r.IntN(len(e.Groups)+1), fmt.Sprintf("{group}: %d", n), p.ids(&e)...)
	case k < 101:
		return "ungroup", p.d.DeleteGroup(name, p.r.IntN(len(e.Groups)+1))
	case k < 104:
		return "bend", p.d.Bend(name, "L", []int{line}, p.runs())
	case k < 107:
		return "straighten", p.d.Bend(name, "L", []int{line}, nil)
	case k < 109:
		at := map[string][2]float64{}
		for _, id := range p.ids(&e) {
			at[id] = p.place()
		}
		notes := map[int][2]float64{}
		if len(e.Notes) > 0 {
			notes[p.r.IntN(len(e.Notes))] = p.place()
		}
		return "place", p.d.Edit("Move", func(f *audit.File) error { return f.Place(name, at, notes) })
	case k < 110:
		return "renote", p.d.SetNote(name, p.r.IntN(len(e.Notes)+1), fmt.Sprintf("# %d\n\tor: so", n), p.place())
	case k < 111:
		var side []circuit.PortRef
		if line < len(e.Lines) {
			side = e.Lines[line].Ports[:1+p.r.IntN(len(e.Lines[line].Ports))]
		}
		return "split", p.d.Edit("Delete branch", func(f *audit.File) error { return f.SplitLine(name, line, side...) })
	}
	return "set", p.d.Set(name+"/"+pick(p, e.Blocks).ID+".nominal_flow", fmt.Sprintf("%d L/min", n))
}

// runs are pieces of line laid by hand.
func (p *player) runs() (out [][2][2]float64) {
	for i := p.r.IntN(3); i >= 0; i-- {
		a, b := p.place(), p.place()
		b[i%2] = a[i%2]
		out = append(out, [2][2]float64{a, b})
	}
	return out
}

// Random edits, undone and done again, never break a file, and lose no comment but
// those in what was deleted.
func TestRandomEdits(t *testing.T) {
	edits, seed := 2500, uint64(20)
	if s := os.Getenv("BARLITRE_LONG"); s != "" {
		n, err := strconv.Atoi(s)
		check(t, err)
		edits = n
	}
	if s := os.Getenv("BARLITRE_SEED"); s != "" { // to try others
		n, err := strconv.ParseUint(s, 10, 64)
		check(t, err)
		seed = n
	}
	b := newBench(t, quick, Options{})
	f, found := audit.Parse([]byte(drawnText), nil, "")
	if f == nil || len(found) > 0 {
		t.Fatal(found)
	}
	check(t, b.begin(f, origin{}))
	p := &player{T: t, d: b.Document, r: rand.New(rand.NewPCG(1, seed))}
	type state struct {
		text   string
		expect map[string]bool
	}
	states, now := []state{{drawnText, comments(drawnText)}}, 0
	done, refused := map[string]int{}, 0
	for i := 0; i < edits; i++ {
		b.clock.pass(time.Minute)
		if k := p.r.IntN(10); k == 0 && now > 0 {
			_, ok := b.Undo()
			now--
			if !ok || string(b.File().Bytes()) != states[now].text {
				t.Fatalf("edit %d: undo does not lead back", i)
			}
			continue
		} else if k == 1 && now < len(states)-1 {
			_, ok := b.Redo()
			now++
			if !ok || string(b.File().Bytes()) != states[now].text {
				t.Fatalf("edit %d: redo does not lead forth", i)
			}
			continue
		}
		what, err := p.edit()
		text := string(b.File().Bytes())
		if err != nil {
			refused++
			if text != states[now].text {
				t.Fatalf("edit %d, %s: refused (%v), but the text changed", i, what, err)
			}
			continue
		}
		if text == states[now].text {
			continue
		}
		done[strings.Fields(what)[0]]++
		expect, has := map[string]bool{}, comments(text)
		gone := comments(strings.Join(p.deleted, ""))
		for c := range states[now].expect {
			if has[c] {
				expect[c] = true
			} else if !gone[c] {
				t.Fatalf("edit %d, %s: comment %s is lost\n%s", i, what, c, text)
			}
		}
		g, found := audit.Parse([]byte(text), nil, "")
		if g == nil || slices.ContainsFunc(found, func(x circuit.Finding) bool { return !strings.Contains(x.Text, "there is no duty") }) {
			t.Fatalf("edit %d, %s: %v\n%s", i, what, found, text)
		}
		for _, e := range g.Circuits {
			if bad := fault(e.Circuit); bad != "" {
				t.Fatalf("edit %d, %s: %s: %s\n%s", i, what, e.Name, bad, text)
			}
		}
		states, now = append(states[:now+1], state{text, expect}), now+1
	}
	last := states[now].text
	for _, ok := b.Undo(); ok; _, ok = b.Undo() {
	}
	if string(b.File().Bytes()) != drawnText {
		t.Error("undone to the start, the text is not the first one")
	}
	for i := 0; i < now; i++ {
		if _, ok := b.Redo(); !ok {
			t.Fatal("cannot do again what was undone")
		}
	}
	if string(b.File().Bytes()) != last {
		t.Error("done again, the text is not the last one")
	}
	for _, what := range []string{"delete", "add", "connect", "join", "junction", "disconnect", "rename", "duplicate", "paste", "rotate", "mirror", "move", "copy", "swap", "remove", "phase", "group", "set", "bend", "place", "split", "regroup", "ungroup", "straighten", "stage"} {
		if done[what] < edits/1000 {
			t.Errorf("%s was done %d times", what, done[what])
		}
	}
	t.Logf("%d edits: %v, %d refused", edits, done, refused)
}
