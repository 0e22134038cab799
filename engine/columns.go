package engine

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"

	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/run"
)

// mostColumns bounds how many right-hand sides are asked for at once.
const mostColumns = 1000

// further are more right-hand sides that the choice is measured on.
type further struct {
	index []int       // from 1, as the file counts
	rhs   [][]float64 // each of length n
	under *run.Columns
	done  bool
}

// columnList reads a list of columns, such as 1-8 or 1,3,5.
func columnList(text string) ([]int, error) {
	var list []int
	for _, w := range strings.Split(text, ",") {
		low, high, isRange := strings.Cut(w, "-")
		if !isRange {
			high = low
		}
		a, err := strconv.Atoi(low)
		b, fault := strconv.Atoi(high)
		if err != nil || fault != nil || a < 1 || b < a || len(list)+b-a >= mostColumns {
			return nil, badOption("--columns must be like 1-8 or 1,3,5, not %q", text)
		}
		for ; a <= b; a++ {
			list = append(list, a)
		}
	}
	return list, nil
}

// withColumn matches the column at the end of FILE:COL.
var withColumn = regexp.MustCompile(`:\d+$`)

// checkColumns returns what is wrong with --columns.
func (o Options) checkColumns() error {
	if o.Columns == "" {
		return nil
	}
	if rhs := o.RHS; rhs == "" || rhs == string(linear.Ones) || rhs == string(linear.Made) || strings.HasPrefix(rhs, "unit:") {
		return badOption("--columns needs --rhs FILE, whose columns it counts")
	}
	_, err := columnList(o.Columns)
	return err
}

// readColumns reads the right-hand sides that --columns names.
func (s *Session) readColumns(n int) (*further, error) {
	if s.opt.Columns == "" {
		return nil, nil
	}
	list, err := columnList(s.opt.Columns)
	if err != nil {
		return nil, err
	}
	c := &further{index: list}
	for _, k := range list {
		b, _, err := load.VectorFile(fmt.Sprintf("%s:%d", withColumn.ReplaceAllString(s.opt.RHS, ""), k), n)
		if err != nil {
			return nil, err
		}
		c.rhs = append(c.rhs, b)
	}
	return c, nil
}

// measureColumns measures the chosen pairing on further right-hand sides, once
// every trial has ended. It says whether some are left.
func (s *Session) measureColumns(b *run.Bench, c *further) bool {
	chosen := s.Snapshot().Choice.Pairing
	m, err := run.Parse(chosen)
	if chosen == "" || err != nil || c.done {
		return false
	}
	if c.under == nil {
		c.under = b.NewColumns(m)
	}
	for k := len(c.under.Done); k < len(c.rhs); k++ {
		if !c.under.Next(s.ctx, c.index[k], c.rhs[k]) {
			return s.ctx.Err() == nil
		}
		for _, t := range b.Trials() {
			if t.History().Pairing == chosen {
				c.under.Tell(t)
				break
			}
		}
	}
	c.done = true
	return false
}
