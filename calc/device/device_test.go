package device_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc/device"
)

// tester is what tests and properties share.
type tester interface {
	Helper()
	Errorf(format string, args ...any)
}

func near(t tester, name string, got, want, tol float64) {
	t.Helper()
	d := got - want
	if !(d <= tol && d >= -tol) {
		t.Errorf("%s = %.9g, want %.9g (± %.3g)", name, got, want, tol)
	}
}

// small is a transistor with every term of the equations at work.
func small() device.BJT {
	b := device.BJTDefaults()
	b.Is, b.Bf, b.Nf, b.Vaf, b.Ikf, b.Ise, b.Ne = 2.39e-14, 294.3, 1.008, 63.2, 0.1357, 3.545e-15, 1.541
	b.Br, b.Nr, b.Var, b.Ikr, b.Isc, b.Nc, b.Xtb = 7.946, 1.004, 25.9, 0.1144, 6.272e-14, 1.243, 1.2
	return b
}

func TestSlopesAreDifferenceQuotients(t *testing.T) {
	par := small()
	const h, hT = 1e-6, 1e-3
	for _, p := range [][2]float64{{0.65, -5}, {0.7, 0.5}, {0.72, 0.65}, {-0.5, 0.6}, {0.3, -0.2}} {
		a := par.At(40)
		at := a.Currents(p[0], p[1])
		slope := func(f func(d float64) device.BJTCurrents, h float64, pick func(device.BJTCurrents) float64) float64 {
			return (pick(f(h)) - pick(f(-h))) / (2 * h)
		}
		be := func(d float64) device.BJTCurrents { return a.Currents(p[0]+d, p[1]) }
		bc := func(d float64) device.BJTCurrents { return a.Currents(p[0], p[1]+d) }
		warm := func(d float64) device.BJTCurrents { w := par.At(40 + d); return w.Currents(p[0], p[1]) }
		ic := func(c device.BJTCurrents) float64 { return c.Ic }
		ib := func(c device.BJTCurrents) float64 { return c.Ib }
		for _, s := range []struct {
			name      string
			got, want float64
		}{
			{"dIc/dVbe", at.IcBE, slope(be, h, ic)}, {"dIc/dVbc", at.IcBC, slope(bc, h, ic)}, {"dIc/dT", at.IcT, slope(warm, hT, ic)},
			{"dIb/dVbe", at.IbBE, slope(be, h, ib)}, {"dIb/dVbc", at.IbBC, slope(bc, h, ib)}, {"dIb/dT", at.IbT, slope(warm, hT, ib)},
		} {
			near(t, s.name, s.got, s.want, 2e-5*math.Abs(s.want)+1e-12)
		}
	}
}

func TestMoveIsAt(t *testing.T) {
	par := small()
	moved := par.At(-20)
	moved.Move(&par, 85)
	fresh := par.At(85)
	if got, want := moved.Currents(0.6, -3), fresh.Currents(0.6, -3); got != want {
		t.Errorf("moved to 85 °C: %+v, want %+v", got, want)
	}
}

// A junction of silicon loses about 2 mV/K at constant current: common
// practice, no source.
func TestJunctionLosesTwoMillivoltsPerKelvin(t *testing.T) {
	par := small()
	vbe := func(celsius float64) float64 {
		a := par.At(celsius)
		low, high := 0.2, 1.0
		for range 60 {
			if mid := (low + high) / 2; a.Currents(mid, -5).Ic < 2e-3 {
				low = mid
			} else {
				high = mid
			}
		}
		return low
	}
	near(t, "dVBE/dT in mV/K", (vbe(50)-vbe(0))/50*1e3, -2, 0.35)
}

func TestFiguresComeBack(t *testing.T) {
	par, assumed := device.BJTFromFigures(device.BJTFigures{
		VBE: 0.66, VBEAt: 2e-3, HFE: 290, HFEAt: 2e-3, VCESat: 0.25, SatIc: 0.1, SatIb: 0.005,
	})
	if len(assumed) != 0 {
		t.Errorf("assumed %v although every figure is given", assumed)
	}
	a := par.At(25)
	at := a.Currents(0.66, -4)
	near(t, "Ic at VBE(on)", at.Ic, 2e-3, 2e-6)
	near(t, "hFE", at.Ic/at.Ib, 290, 0.3)
	// Saturation: find the inner voltages that carry 100 mA on 5 mA of base.
	vbe, vbc := 0.75, 0.6
	for range 100 {
		c := a.Currents(vbe, vbc)
		f1, f2 := c.Ic-0.1, c.Ib-0.005
		det := c.IcBE*c.IbBC - c.IcBC*c.IbBE
		vbe -= math.Max(-0.02, math.Min(0.02, (f1*c.IbBC-f2*c.IcBC)/det))
		vbc -= math.Max(-0.02, math.Min(0.02, (f2*c.IcBE-f1*c.IbBE)/det))
	}
	near(t, "VCE(sat)", vbe-vbc+0.1*par.Rc, 0.25, 1e-3)
}

func TestMissingFiguresAreNamed(t *testing.T) {
	_, assumed := device.BJTFromFigures(device.BJTFigures{})
	if len(assumed) != 2 {
		t.Errorf("assumed %v, want VBE and hFE named", assumed)
	}
}

func TestBaseResistanceFallsFromRbToRbm(t *testing.T) {
	b := device.BJT{Rb: 60, Rbm: 8, Irb: 2e-4}
	near(t, "at no current", b.BaseResistance(1e-9, 1), 60, 0.5)
	near(t, "at irb", b.BaseResistance(2e-4, 1), (60+8)/2.0, 1)
	near(t, "at much current", b.BaseResistance(1, 1), 8, 1.5)
	b.Irb = 0
	near(t, "by base charge", b.BaseResistance(1e-3, 2), 8+52/2.0, 1e-9)
}

func TestFitFindsTheCurve(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		want := device.LED{
			N: rapid.Float64Range(1.5, 4).Draw(t, "n"), Rs: rapid.Float64Range(0.2, 15).Draw(t, "rs"),
			Is: math.Pow(10, rapid.Float64Range(-24, -15).Draw(t, "log is")),
		}
		var points [][2]float64
		for _, i := range []float64{0.5e-3, 1e-3, 2e-3, 5e-3, 10e-3, 20e-3} {
			points = append(points, [2]float64{i, want.Voltage(i, 25)})
		}
		got, ok := device.LEDFromPoints(points)
		if !ok {
			t.Fatal("no fit")
		}
		for _, i := range []float64{1e-3, 3e-3, 15e-3} {
			near(t, "V", got.Voltage(i, 25), want.Voltage(i, 25), 1e-6)
		}
	})
}

func TestFitWithFewPointsPassesThroughThem(t *testing.T) {
	for _, points := range [][][2]float64{
		{{0.02, 3.1}}, {{0.005, 2.8}, {0.02, 3.1}}, {{0.02, 2.0}, {0.02, 2.0}},
	} {
		got, ok := device.LEDFromPoints(points)
		if !ok {
			t.Fatalf("no fit for %v", points)
		}
		for _, p := range points {
			near(t, "V", got.Voltage(p[0], 25), p[1], 1e-6)
		}
		if !(got.Rs >= 0) || !(got.Is > 0) {
			t.Errorf("%v: rs %v, is %v", points, got.Rs, got.Is)
		}
	}
	if _, ok := device.LEDFromPoints([][2]float64{{0, 0}, {-1, 2}}); ok {
		t.Error("a fit without any usable point")
	}
}

func TestShiftedMovesTheCurve(t *testing.T) {
	d := device.LED{Is: 8e-21, N: 2.55, Rs: 4}
	moved := d.Shifted(0.2)
	for _, i := range []float64{1e-3, 20e-3} {
		near(t, "shift", moved.Voltage(i, 25)-d.Voltage(i, 25), 0.2, 1e-9)
	}
}

func TestWorkingHeatIsItsOwnPower(t *testing.T) {
	for _, tempco := range []float64{-0.0025, 0, 0.001} {
		d := device.LED{Is: 8e-21, N: 2.55, Rs: 4, Tempco: tempco, Rth: 300}
		p := d.Working(0.02, 35)
		near(t, "junction", p.Junction, 35+300*0.02*p.Voltage, 1e-9)
		near(t, "voltage", p.Voltage, d.Voltage(0.02, p.Junction), 1e-12)
		const h = 1e-7
		slope := (d.Working(0.02+h, 35).Voltage - d.Working(0.02-h, 35).Voltage) / (2 * h)
		near(t, "slope", p.Slope, slope, 1e-4*math.Abs(slope))
	}
	hot := device.LED{Is: 8e-21, N: 2.55, Rs: 4, Tempco: 0.01, Rth: 10000}
	if !hot.Working(0.02, 25).Runaway {
		t.Error("a positive tempco with a loop gain of 2 has a stable temperature")
	}
}
