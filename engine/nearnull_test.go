package engine

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// truss is a 2-D square lattice of n x n joints with bars to the right, up and
// along one diagonal, every bar of stiffness 1 over its length; two unknowns a
// joint, no support. It returns the joints' coordinates too.
func truss(n int) (*linear.CSR, [][]float64) {
	xy := [][]float64{make([]float64, n*n), make([]float64, n*n)}
	for k := range xy[0] {
		xy[0][k], xy[1][k] = float64(k%n), float64(k/n)
	}
	var e []linear.Entry
	bar := func(p, q int) {
		dx, dy := xy[0][q]-xy[0][p], xy[1][q]-xy[1][p]
		l := math.Hypot(dx, dy)
		c := [2]float64{dx / l, dy / l}
		for i := range 2 {
			for j := range 2 {
				k := c[i] * c[j] / l
				e = append(e, linear.Entry{I: 2*p + i, J: 2*p + j, V: k}, linear.Entry{I: 2*q + i, J: 2*q + j, V: k},
					linear.Entry{I: 2*p + i, J: 2*q + j, V: -k}, linear.Entry{I: 2*q + i, J: 2*p + j, V: -k})
			}
		}
	}
	for k := range xy[0] {
		right, up := k%n < n-1, k/n < n-1
		if right {
			bar(k, k+1)
		}
		if up {
			bar(k, k+n)
		}
		if right && up {
			bar(k, k+n+1)
			bar(k+1, k+n)
		}
	}
	return linear.FromEntries(2*n*n, 2*n*n, e), xy
}

// An unsupported body maps its rigid motions to zero: three in the plane.
func TestRigidMotionsAreFree(t *testing.T) {
	a, xy := truss(6)
	v := rigidMotions(xy, 2)
	if len(v) != 3 {
		t.Fatalf("%d motions, want 3", len(v))
	}
	y := make([]float64, a.NRows)
	for i := range v {
		a.Apply(y, v[i])
		if r := linear.NormInf(y); r > 1e-13 {
			t.Errorf("motion %d is resisted by %g", i, r)
		}
	}
	if m := rigidMotions([][]float64{{0, 1}, {0, 2}, {1, 1}}, 6); len(m) != 6 || m[3][1] != -1 || m[5][11] != 1 {
		t.Errorf("space with rotations: %v", m)
	}
	if rigidMotions(xy, 5) != nil {
		t.Error("five unknowns a node of the plane have rigid motions")
	}
}

// Given coordinates, multigrid needs fewer iterations on a held truss than
// with constants, and with --null the same as with the coordinates they come
// from.
func TestCoordinatesHelpMultigrid(t *testing.T) {
	const n = 40
	a, xy := truss(n)
	for k := range n { // hold the lower edge
		for d := range 2 {
			i := 2*k + d
			for p := a.Ptr[i]; p < a.Ptr[i+1]; p++ {
				if int(a.Col[p]) == i {
					a.Val[p] += 1e3
				}
			}
		}
	}
	file := written(t, a, 0)
	var at, null strings.Builder
	null.WriteString("")
	v := rigidMotions(xy, 2)
	for k := range xy[0] {
		at.WriteString(num(xy[0][k]) + " " + num(xy[1][k]) + "\n")
	}
	for i := range v[0] {
		null.WriteString(num(v[0][i]) + " " + num(v[1][i]) + " " + num(v[2][i]) + "\n")
	}
	places, vectors := text(t, "xy.txt", at.String()), text(t, "null.txt", null.String())
	count := func(opt Options) int {
		opt.Pairs = []string{"cg+amg"}
		h := only(t, ended(t, file, opt))
		if h.Stop != trace.Converged {
			t.Fatalf("%+v: %s (%s)", opt, h.Stop, h.Reason)
		}
		return h.Iterations
	}
	blind, constants := count(Options{}), count(Options{Dofs: 2})
	rigid, given := count(Options{Dofs: 2, Coordinates: places}), count(Options{Dofs: 2, Null: vectors})
	t.Logf("one constant %d, constants %d, rigid motions %d, given %d", blind, constants, rigid, given)
	if rigid >= blind || rigid > constants || given != rigid {
		t.Errorf("iterations: one constant %d, constants %d, rigid motions %d, the same from a file %d", blind, constants, rigid, given)
	}
	scaled := only(t, ended(t, file, Options{Dofs: 2, Coordinates: places, Pairs: []string{"scale/cg+amg"}}))
	if scaled.Stop != trace.Converged || scaled.Iterations > 2*rigid {
		t.Errorf("scaled: %s in %d, want about %d", scaled.Stop, scaled.Iterations, rigid)
	}
}

func num(x float64) string {
	var b strings.Builder
	linear.WriteVector(&b, []float64{x}, nil)
	lines := strings.Split(strings.TrimSpace(b.String()), "\n")
	return lines[len(lines)-1]
}

func text(t *testing.T, name, content string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(content), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}
