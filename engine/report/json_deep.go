package report

import (
	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// deepJSON is what deeper looks at a trial add to it.
type deepJSON struct {
	Locks        []lockJSON           `json:"locks"`
	EnergyErrors []energyJSON         `json:"energy_errors"`
	EnergyProved bool                 `json:"energy_upper_proved"`
	Delay        int                  `json:"delay_iterations"`
	Harmonic     [][2]number          `json:"harmonic_ritz"` // real and imaginary parts
	Predictions  []predictionJSON     `json:"predictions"`
	Without      []counterfactualJSON `json:"without"`
	Fields       []fieldJSON          `json:"fields"`
	Probe        *probeJSON           `json:"preconditioner_probe"`
	Counts       []int                `json:"rerun_iterations"`
	Columns      []columnJSON         `json:"columns"`
}

type lockJSON struct {
	Value     number `json:"value"`
	Iteration int    `json:"iteration"`
	Copies    int    `json:"copies"`
	Weight    number `json:"weight"`
}

type energyJSON struct {
	Iteration int    `json:"iteration"`
	Lower     number `json:"lower"`
	Upper     number `json:"upper"`
}

type predictionJSON struct {
	Iteration int    `json:"iteration"`
	Total     number `json:"total"`
	Low       number `json:"low"`
	High      number `json:"high"`
}

type counterfactualJSON struct {
	What       string `json:"what"`
	Removed    int    `json:"removed"`
	Largest    number `json:"largest_removed"`
	Next       number `json:"smallest_kept"`
	Iterations int    `json:"iterations"`
}

type fieldJSON struct {
	Name          string `json:"name"`
	Rows          int    `json:"rows"`
	Residual      number `json:"residual"`
	Componentwise number `json:"componentwise_error"`
	Tol           number `json:"tol"` // null: none was set
}

type probeJSON struct {
	Asymmetry    number `json:"asymmetry"`
	Nonlinear    number `json:"nonlinearity"`
	Unrepeatable number `json:"unrepeatable"`
	Distance     number `json:"distance"`
	WrongWay     number `json:"distance_of_m"`
	Transposed   number `json:"distance_of_transpose"`
	Plain        number `json:"distance_of_diagonal"`
	Deviation    number `json:"deviation"` // ||A - M||_F over ||A||_F of incomplete factors
}

type columnJSON struct {
	Index      int    `json:"index"`
	Iterations int    `json:"iterations"`
	Seconds    number `json:"seconds"`
	True       number `json:"true_residual"`
	Reached    bool   `json:"reached"`
}

type outcomeJSON struct {
	Pairing   string `json:"pairing"`
	What      string `json:"what"`
	Predicted number `json:"predicted"`
	Came      number `json:"came"`
}

type ruledJSON struct {
	Pairing string `json:"pairing"`
	Reason  string `json:"reason"`
}

// all turns a list into its JSON form, never null.
func all[T, J any](list []T, turn func(T) J) []J {
	out := make([]J, 0, len(list))
	for _, x := range list {
		out = append(out, turn(x))
	}
	return out
}

func toDeep(t trace.History) deepJSON {
	return deepJSON{
		Locks: all(t.Locks, func(l trace.Lock) lockJSON { return lockJSON{number(l.Value), l.Iter, l.Copies, number(l.Weight)} }),
		EnergyErrors: all(t.EnergyErrors, func(e trace.EnergyError) energyJSON {
			return energyJSON{e.Iter, number(e.Lower), number(e.Upper)}
		}),
		EnergyProved: t.EnergyProved,
		Delay:        t.Delay,
		Harmonic:     toComplex(t.Harmonic),
		Predictions: all(t.Predictions, func(p trace.Prediction) predictionJSON {
			return predictionJSON{p.Iter, number(p.Total), number(p.Low), number(p.High)}
		}),
		Without: all(t.Without, func(c trace.Counterfactual) counterfactualJSON {
			return counterfactualJSON{tame(c.What), c.Removed, number(c.Largest), number(c.Next), c.Iterations}
		}),
		Fields: all(t.Fields, func(f trace.Field) fieldJSON {
			return fieldJSON{tame(f.Name), f.Rows, number(f.Residual), number(f.Componentwise), measured(f.Tol)}
		}),
		Probe:  toProbe(t.Probe),
		Counts: all(t.Counts, func(c int) int { return c }),
		Columns: all(t.Columns, func(c trace.Column) columnJSON {
			return columnJSON{c.Index, c.Iterations, number(c.Seconds), number(c.True), c.Reached}
		}),
	}
}

func toProbe(p *trace.MProbe) *probeJSON {
	if p == nil {
		return nil
	}
	return &probeJSON{number(p.Asymmetry), number(p.Nonlinear), number(p.Unrepeatable), number(p.Distance), number(p.WrongWay), number(p.Transposed), number(p.Plain),
		measured(p.Deviation)}
}

func toComplex(zs []complex128) [][2]number {
	return all(zs, func(z complex128) [2]number { return [2]number{number(real(z)), number(imag(z))} })
}

func toOutcome(o choose.Outcome) outcomeJSON {
	return outcomeJSON{tame(o.Pairing), tame(o.What), number(o.Predicted), number(o.Came)}
}

func toRuled(r choose.Ruled) ruledJSON { return ruledJSON{tame(r.Pairing), tame(r.Reason)} }
