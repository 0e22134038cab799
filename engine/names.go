package engine

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"dwindle/engine/linear"
	"dwindle/engine/load"
)

// setNames gives the rows the labels and fields that the user knows. Unknowns
// that stand next to each other at a node are fields u1, u2, ... where no
// names are given.
func setNames(s *linear.System, opt Options) error {
	n := s.N()
	if opt.Labels != "" {
		labels, err := load.LabelsFile(opt.Labels, n)
		if err != nil {
			return err
		}
		s.Labels = labels
	}
	switch {
	case opt.Fields != "":
		names, of, err := load.FieldsFile(opt.Fields, n)
		if err != nil {
			return err
		}
		s.Fields, s.FieldOf = names, of
	case opt.Dofs > 1:
		s.FieldOf = make([]int32, n)
		for k := range opt.Dofs {
			s.Fields = append(s.Fields, fmt.Sprintf("u%d", k+1))
		}
		for i := range s.FieldOf {
			s.FieldOf[i] = int32(i % opt.Dofs)
		}
	}
	return nil
}

// fieldTols returns the tolerance that must hold for each field as well, 0
// where none was asked for; nil if none was at all.
func fieldTols(s linear.System, opt Options) ([]float64, error) {
	if len(opt.FieldTols) == 0 {
		return nil, nil
	}
	if s.Fields == nil {
		return nil, badOption("--tol-field needs fields: give --fields FILE, or --dofs K for u1 to uK")
	}
	tols := make([]float64, len(s.Fields))
	for _, text := range opt.FieldTols {
		name, tol, err := fieldTol(text)
		if err != nil {
			return nil, err
		}
		k := slices.Index(s.Fields, name)
		if k < 0 {
			return nil, badOption("--tol-field %s: there is no such field; there are %s", text, strings.Join(s.Fields, ", "))
		}
		tols[k] = tol
	}
	return tols, nil
}

// fieldTol takes NAME=TOL apart.
func fieldTol(text string) (name string, tol float64, err error) {
	k := strings.LastIndexByte(text, '=')
	if k < 1 {
		return "", 0, badOption("--tol-field must be NAME=TOL, such as p=1e-6, not %q", text)
	}
	tol, err = strconv.ParseFloat(text[k+1:], 64)
	if err != nil || !(tol > 0 && tol < 1) {
		return "", 0, badOption("--tol-field %s: the tolerance must lie between 0 and 1", text)
	}
	return text[:k], tol, nil
}
