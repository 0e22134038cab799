package run

import (
	"context"
	"slices"
	"testing"
	"time"

	"dwindle/engine/trace"
)

// steered runs one pairing to its end and then lets f order, once.
func steered(t *testing.T, pairing string, f func(*Bench, *Trial)) trace.History {
	t.Helper()
	b := NewBench(sample(t, "plate:12"), limits(1e-8, 1000), 0, ticking(time.Millisecond))
	m, err := Parse(pairing)
	if err != nil {
		t.Fatal(err)
	}
	u := b.Add(m)
	b.Steer(func() bool {
		if b.Live() {
			return true
		}
		f(b, u)
		return false
	})
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	go b.Run(ctx)
	b.WaitEnded(ctx)
	if ctx.Err() != nil {
		t.Fatal("it did not end within a minute")
	}
	return u.History()
}

// A repetition takes the same steps, so that by a clock that counts them it
// takes the same time; the trial itself is charged nothing.
func TestRepeatTakesTheSameSteps(t *testing.T) {
	for _, p := range []string{"cg+none", "minres+none", "bicgstab+ilu", "scale/gmres:10+jacobi"} {
		once := finish(t, sample(t, "plate:12"), limits(1e-8, 1000), ticking(time.Millisecond), p)[0]
		h := steered(t, p, func(b *Bench, u *Trial) { b.Repeat(context.Background(), u, 2) })
		if len(h.Reruns) != 2 || h.OwnTime != once.OwnTime || h.Iterations != once.Iterations {
			t.Fatalf("%s: %d reruns, own %v, alone %v", p, len(h.Reruns), h.OwnTime, once.OwnTime)
		}
		for _, r := range h.Reruns {
			if r.Own != once.OwnTime {
				t.Errorf("%s: a repetition took %v, the trial %v", p, r.Own, once.OwnTime)
			}
		}
	}
}

// Every column takes the iterations that it takes as the system's own b, with
// the M that the first of them built.
func TestColumnsAreSolvedAsIfAlone(t *testing.T) {
	s := sample(t, "plate:12")
	var rhs [][]float64
	for k := range 3 {
		b := make([]float64, s.N())
		for i := range b {
			b[i] = float64((i*(k+3))%11) - 4
		}
		rhs = append(rhs, b)
	}
	for _, p := range []string{"cg+ic", "scale/bicgstab+ilu", "richardson+cholesky"} {
		h := steered(t, p, func(b *Bench, u *Trial) {
			c := b.NewColumns(u.Method())
			for k, x := range rhs {
				if !c.Next(context.Background(), k+1, x) {
					t.Error("interrupted")
				}
			}
			c.Tell(u)
		})
		var got, want []int
		for k, c := range h.Columns {
			got = append(got, c.Iterations)
			if c.Index != k+1 || !c.Reached || !(c.True <= 1e-8) {
				t.Errorf("%s: column %+v", p, c)
			}
		}
		for _, x := range rhs {
			one := s
			one.B = x
			want = append(want, finish(t, one, limits(1e-8, 1000), ticking(time.Millisecond), p)[0].Iterations)
		}
		if !slices.Equal(got, want) {
			t.Errorf("%s: iterations %v, alone %v", p, got, want)
		}
	}
}

// A set-up that takes longer than it may ends as outpaced, and says so.
func TestBoundedSetUp(t *testing.T) {
	b := NewBench(sample(t, "plate:300"), limits(1e-8, 1000), 0, nil)
	m, err := Parse("richardson+lu")
	if err != nil {
		t.Fatal(err)
	}
	u := b.Add(m)
	b.Bound(u, time.Millisecond)
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	go b.Run(ctx)
	b.WaitEnded(ctx)
	if h := u.History(); h.Stop != trace.Outpaced || h.Iterations != 0 {
		t.Errorf("%s after %d iterations: %s", h.Stop, h.Iterations, h.Reason)
	}
}
