package rules_test

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"
)

// inputs are the "key=value;key=value" of a row. What is wrong with them is
// gathered, and every key must be asked for.
type inputs struct {
	t      *testing.T
	values map[string]string
	asked  map[string]bool
	err    error
	// countless says that a count was asked for and is none.
	countless bool
}

func readInputs(t *testing.T, s string) *inputs {
	in := &inputs{t: t, values: map[string]string{}, asked: map[string]bool{}}
	for pair := range strings.SplitSeq(s, ";") {
		k, v, ok := strings.Cut(pair, "=")
		if _, twice := in.values[k]; !ok || v == "" || twice {
			in.fail(fmt.Errorf("input %q is no key=value, or given twice", pair))
		}
		in.values[k] = v
	}
	return in
}

func (in *inputs) fail(err error) { in.err = errors.Join(in.err, err) }

// used is what is wrong with the inputs once a quantity has asked for its own.
func (in *inputs) used() error {
	err := in.err
	for key := range in.values {
		if !in.asked[key] {
			err = errors.Join(err, fmt.Errorf("input %q is not used", key))
		}
	}
	return err
}

func (in *inputs) has(key string) bool { return in.values[key] != "" }

func (in *inputs) text(key string) string {
	if !in.has(key) {
		in.fail(fmt.Errorf("input %q is missing", key))
	}
	return in.textOr(key, "")
}

// textOr is an input that a row may leave out.
func (in *inputs) textOr(key, absent string) string {
	in.asked[key] = true
	if !in.has(key) {
		return absent
	}
	return in.values[key]
}

func (in *inputs) list(key string) []float64 {
	var out []float64
	for word := range strings.FieldsSeq(in.text(key)) {
		v, err := strconv.ParseFloat(word, 64)
		in.fail(err)
		out = append(out, v)
	}
	return out
}

// paired are two lists of one length.
func (in *inputs) paired(first, second string) (a, b []float64) {
	a, b = in.list(first), in.list(second)
	if len(a) != len(b) {
		in.fail(fmt.Errorf("inputs %q and %q are not of one length", first, second))
		return nil, nil
	}
	return a, b
}

// num is the one number of an input, or the i-th of a list.
func (in *inputs) num(key string, i ...int) float64 {
	l := in.list(key)
	switch {
	case len(i) == 0 && len(l) == 1:
		return l[0]
	case len(i) == 1 && i[0] < len(l):
		return l[i[0]]
	}
	in.fail(fmt.Errorf("input %q lacks a number or has one too many", key))
	return math.NaN()
}

func (in *inputs) count(key string) int {
	n, err := strconv.Atoi(in.text(key))
	in.fail(err)
	in.countless = in.countless || err != nil
	return n
}
