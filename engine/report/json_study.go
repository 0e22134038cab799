package report

import "dwindle/engine/inspect"

// studyJSON is the second look at the system; parts not looked at are null or
// empty.
type studyJSON struct {
	Spectra   []spectrumJSON `json:"spectra"`
	Null      []nullJSON     `json:"free_directions"`
	Left      []nullJSON     `json:"left_directions"`
	Nullity   int            `json:"nullity"`      // free directions found
	More      bool           `json:"nullity_more"` // and more may be there
	Normality *normalityJSON `json:"normality"`
	Density   []binJSON      `json:"density"`
	Couplings *couplingsJSON `json:"couplings"`
	Block     *blockJSON     `json:"block"`
	Lines     []linesJSON    `json:"single_rows"`
	Lopsided  *lopsidedJSON  `json:"asymmetry"`
	Growth    *growthJSON    `json:"growth"`
	Restore   *restoreJSON   `json:"restoring_shift"`
	Digits    number         `json:"digits"`
}

type spectrumJSON struct {
	Of            string      `json:"of"`
	How           string      `json:"how"`
	Certainty     *string     `json:"certainty"`
	Exact         bool        `json:"exact"`
	Norm          *string     `json:"norm"`
	Smallest      number      `json:"smallest"`
	SmallestBound number      `json:"smallest_bound"`
	Largest       number      `json:"largest"`
	LargestBound  number      `json:"largest_bound"`
	Condition     number      `json:"condition"`
	Condition1    number      `json:"condition_1_norm"`
	Negative      *int        `json:"negative"`
	Low           []number    `json:"low"`
	High          []number    `json:"high"`
	Values        [][2]number `json:"values"` // real and imaginary parts
}

type nullJSON struct {
	Quotient number     `json:"quotient"`
	Next     number     `json:"next"`
	Rows     []int      `json:"rows"`
	Shares   []number   `json:"shares"`
	Rigid    *string    `json:"rigid"`
	Support  int        `json:"support"`
	Load     number     `json:"load"`
	Rounding number     `json:"rounding"` // of a left direction
	Level    *levelJSON `json:"level"`    // where the direction is one number on some rows
}

type levelJSON struct {
	Count int `json:"count"`
	First int `json:"first"`
	Last  int `json:"last"`
}

type normalityJSON struct {
	Henrici        number `json:"henrici"`
	Exact          bool   `json:"exact"`
	Equilibrated   number `json:"henrici_equilibrated"`
	FieldMin       number `json:"field_min"`
	FieldMax       number `json:"field_max"`
	FieldHoldsZero bool   `json:"field_holds_zero"`
	SkewMax        number `json:"skew_max"`
	Leftmost       number `json:"leftmost"`
	Rightmost      number `json:"rightmost"`
}

type binJSON struct {
	From  number `json:"from"`
	To    number `json:"to"`
	Count number `json:"count"`
	Sd    number `json:"sd"`
}

type couplingsJSON struct {
	Scalar    bool   `json:"scalar"`
	OneWay    number `json:"one_way_share"`
	Ratio     number `json:"ratio"`
	Jump      number `json:"jump"`
	JumpRows  []int  `json:"jump_rows"`
	Mesh      bool   `json:"mesh"`
	Dimension number `json:"dimension"`
}

type blockJSON struct {
	Size  int    `json:"size"`
	Share number `json:"share"`
}

type linesJSON struct {
	Kind  string `json:"kind"`
	Count int    `json:"count"`
	Rows  []int  `json:"rows"`
	Value number `json:"diagonal"`
	Other number `json:"diagonal_elsewhere"`
}

type lopsidedJSON struct {
	Rows         []int `json:"rows"`
	Count        int   `json:"count"`
	Identity     int   `json:"identity"`
	IdentityRows []int `json:"identity_rows"`
	OnlyThem     bool  `json:"only_them"`
}

type growthJSON struct {
	Pairing    string `json:"pairing"`
	Unknowns   []int  `json:"unknowns"`
	Iterations []int  `json:"iterations"`
	Exponent   number `json:"exponent"`
}

type restoreJSON struct {
	Shift  number   `json:"shift"`
	Bound  number   `json:"bound"`
	Of     string   `json:"of"`
	Rows   []int    `json:"rows"`
	Shares []number `json:"shares"`
}

// toStudy is null before the second look.
func toStudy(f *inspect.Facts) *studyJSON {
	if f == nil || f.Study == nil {
		return nil
	}
	s := f.Study
	j := &studyJSON{Spectra: []spectrumJSON{}, Null: all(s.Null, toNull), Left: all(s.Left, toNull), Nullity: s.Nullity, More: s.More, Density: all(s.Density, toBin), Lines: all(s.Lines, toLines), Digits: number(s.Digits)}
	for _, x := range []*inspect.Spectrum{s.Raw, s.Equilibrated, s.Jacobi, s.Rest} {
		if x != nil {
			j.Spectra = append(j.Spectra, toSpectrum(*x))
		}
	}
	if n := s.Normality; n != nil {
		j.Normality = &normalityJSON{number(n.Henrici), n.Exact, number(n.Equilibrated), number(n.FieldMin), number(n.FieldMax), n.FieldHoldsZero,
			number(n.SkewMax), number(n.LeftmostRe), number(n.RightRe)}
	}
	if c := s.Couplings; c != nil {
		j.Couplings = &couplingsJSON{c.Scalar, number(c.OneWay), number(c.Ratio), number(c.Jump), fromOne(c.JumpRows), c.Mesh, number(c.Dimension)}
	}
	if b := s.Block; b != nil {
		j.Block = &blockJSON{b.Size, number(b.Share)}
	}
	if l := s.Lopsided; l != nil {
		j.Lopsided = &lopsidedJSON{fromOne(l.Rows), l.Count, l.Identity, fromOne(l.IdentityRows), l.OnlyThem}
	}
	if g := s.Growth; g != nil {
		same := func(n int) int { return n }
		j.Growth = &growthJSON{tame(g.Pairing), all(g.Unknowns, same), all(g.Iterations, same), number(g.Exponent)}
	}
	if r := s.Restore; r != nil {
		j.Restore = &restoreJSON{number(r.Shift), number(r.Bound), tame(r.Of), fromOne(r.Rows), numbersOf(r.Shares)}
	}
	return j
}

func toSpectrum(x inspect.Spectrum) spectrumJSON {
	j := spectrumJSON{tame(x.Of), tame(x.How), optional(string(x.Certainty)), x.Exact, optional(x.Norm), number(x.Smallest),
		number(x.SmallestBound), number(x.Largest), number(x.LargestBound), number(x.Condition), number(x.Condition1), nil, numbersOf(x.Low), numbersOf(x.High), toComplex(x.Values)}
	if x.Negative >= 0 {
		j.Negative = &x.Negative
	}
	return j
}

func numbersOf(xs []float64) []number {
	return all(xs, func(x float64) number { return number(x) })
}

func toNull(v inspect.NullDirection) nullJSON {
	j := nullJSON{number(v.Quotient), number(v.Next), fromOne(v.Rows), numbersOf(v.Shares), optional(v.Rigid), v.Support, number(v.Load), measured(v.Rounding), nil}
	if l := v.Level; l != nil {
		j.Level = &levelJSON{l.Count, l.First + 1, l.Last + 1}
	}
	return j
}

func toBin(b inspect.Bin) binJSON {
	return binJSON{number(b.From), number(b.To), number(b.Count), number(b.Sd)}
}

func toLines(l inspect.LineRows) linesJSON {
	return linesJSON{tame(l.Kind), l.Count, fromOne(l.Rows), number(l.Value), number(l.Other)}
}
