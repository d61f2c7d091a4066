package main

import (
	"errors"
	"flag"
	"fmt"
	"image"
	"image/png"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines"
	"barlitre/machines/units"
)

// fitCall is what the command line of `barlitre fit` asks for.
type fitCall struct {
	file, png string
	full      float64 // m³/rad, 0 = the largest in the file
	fluid     machines.Fluid
}

func parseFit(args []string, errs io.Writer) (fitCall, error) {
	c := fitCall{fluid: machines.Fluid{Mu: 0.026, Rho: machines.DefaultDensity15, Bulk: machines.DefaultBulkModulus}}
	f := flag.NewFlagSet("barlitre fit", flag.ContinueOnError)
	f.SetOutput(errs)
	quantity := func(name string, to *float64, d units.Dim, text string) {
		f.Func(name, text, func(s string) error {
			si, _, err := units.Parse(s, d)
			if err == nil && !(si > 0) {
				err = errors.New("must be above 0")
			}
			*to = si
			return err
		})
	}
	quantity("displacement", &c.full, units.DisplacementPerRev, "displacement at full setting, such as \"57 cm3/rev\"; default: the largest in the file")
	quantity("viscosity", &c.fluid.Mu, units.DynamicViscosity, "dynamic viscosity of the oil while it was measured; default 26 mPa s, ISO VG 46 at 50 C")
	quantity("bulk", &c.fluid.Bulk, units.Pressure, "bulk modulus of that oil; default 1.4 GPa")
	f.StringVar(&c.png, "png", "", "draw the efficiency map and what the fit leaves as pictures into the folder `DIR`")
	files, err := parseMixed(f, args)
	switch {
	case err != nil:
		return c, err
	case len(files) == 0:
		return c, errors.New("name a CSV file of measured points")
	case len(files) > 1:
		return c, errors.New("name one file of measured points")
	}
	c.file = files[0]
	return c, nil
}

// fit finds the loss coefficients of a pump or motor from measured points.
func fit(args []string, out, errs io.Writer) int {
	c, err := parseFit(args, errs)
	if errors.Is(err, flag.ErrHelp) {
		return exitOK
	}
	if err != nil {
		fmt.Fprintln(errs, "barlitre fit:", err)
		return exitUnreadable
	}
	data, err := os.ReadFile(c.file)
	if err != nil {
		fmt.Fprintln(errs, "barlitre fit:", err)
		return exitUnreadable
	}
	measured, full, f, err := audit.FitTable(filepath.Base(c.file), data, c.full, c.fluid)
	if err != nil {
		fmt.Fprintln(errs, "barlitre fit:", err)
		return exitUnreadable
	}
	printFit(out, c, measured, full, f)
	if c.png != "" {
		if err := drawFit(c.png, baseName(c.file), f); err != nil {
			fmt.Fprintln(errs, "barlitre fit:", err)
			return exitUnreadable
		}
		fmt.Fprintf(out, "\nPictures written to %s\n", c.png)
	}
	return exitOK
}

// printFit writes the coefficients as an audit file takes them, and how well they fit.
func printFit(w io.Writer, c fitCall, measured *machines.Measured, full float64, f *machines.Fit) {
	show := func(x float64, d units.Dim) string { return units.FileText(x, units.Preferred(d, units.Metric)) }
	what := "pump"
	if measured.Motor {
		what = "motor"
	}
	fmt.Fprintf(w, "%s: %d points of a %s at %d speeds\n", c.file, len(f.Points), what, len(machines.Speeds(f.Points)))
	fmt.Fprintf(w, "  read: %s\n", strings.Join(measured.Used, ", "))
	if len(measured.Ignored) > 0 {
		fmt.Fprintf(w, "  not used: %s\n", strings.Join(measured.Ignored, ", "))
	}
	fmt.Fprintf(w, "  oil: %s, %s, bulk modulus %s; the coefficients hold with these\n\n", show(c.fluid.Mu, units.DynamicViscosity), show(c.fluid.Rho, units.Density), show(c.fluid.Bulk, units.Pressure))
	l := f.Law
	number := func(x float64) string { return fmt.Sprintf("%.4g", x) }
	for _, row := range [][3]string{
		{"displacement", show(full, units.DisplacementPerRev), "at full setting"},
		{"slip", number(l.Cs), "laminar slip Cs"}, {"turbulent_slip", number(l.Cst), "Cst"}, {"compression", number(l.K), "kB"},
		{"dead_volume", number(l.Kd), "kV"}, {"friction", number(l.Cf), "pressure friction Cf"}, {"viscous", number(l.Cv), "viscous friction Cv"},
		{"hydrodynamic", number(l.Ch), "Ch"}, {"drag", number(l.Tc) + " N m", "constant friction Tc"},
	} {
		fmt.Fprintf(w, "  %-16s %-16s %s\n", row[0]+":", row[1], row[2])
	}
	at := f.Points[f.Worst]
	fmt.Fprintf(w, "\n  rms %.2f efficiency points; worst %+.1f in line %d\n", 100*f.RMS, 100*f.Residual[f.Worst], at.Line)
	if !math.IsNaN(f.HeldOut) {
		fmt.Fprintf(w, "  rms %.2f at speeds it was not fitted to (each held out in turn)\n", 100*f.HeldOut)
	}
	for _, text := range f.Warnings {
		fmt.Fprintf(w, "  warning: %s\n", text)
	}
}

// drawFit writes the pictures of a fit.
func drawFit(dir, name string, f *machines.Fit) error {
	m := audit.FitMap(name, f)
	for what, draw := range map[string]func(pen.Pen, float64, float64){
		"map":       func(p pen.Pen, w, h float64) { figures.MapOverSpeed(m, 0, units.Metric).Draw(p, w, h, figures.Light) },
		"setting":   func(p pen.Pen, w, h float64) { figures.MapOverSetting(m, 0, units.Metric).Draw(p, w, h, figures.Light) },
		"residuals": func(p pen.Pen, w, h float64) { figures.FitResiduals(m, units.Metric).Draw(p, w, h, figures.Light) },
	} {
		const w, h, edge = 900, 640, 16
		r := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, w+2*edge, h+2*edge)))
		r.Clear(figures.Light.Card)
		r.Push(edge, edge, 1)
		draw(r, w, h)
		r.Pop()
		path := filepath.Join(dir, name+"-"+what+".png")
		if err := writeWhole(path, func(out io.Writer) error { return png.Encode(out, r.Image()) }); err != nil {
			return err
		}
	}
	return nil
}
