package nk

import (
	"fmt"
	"math/cmplx"
)

// Sum is a model whose permittivity is the sum of the permittivities of its
// terms, as of independent oscillators: Sum{&Lorentz{...}, &Drude{...}}. The
// background is counted once per term, so all terms but one have EpsInf = 0. A
// pointer to a Sum is a Model; its parameters are those of the terms one after
// the other, the names with the number of the term in front.
type Sum []Model

// Permittivity returns eps; see Model. An empty sum is an error (ErrInput).
func (m *Sum) Permittivity(grad []complex128, lambda float64) (complex128, error) {
	if len(*m) == 0 {
		return 0, fmt.Errorf("nk: sum of no models: %w", ErrInput)
	}
	for i, t := range *m {
		if t == nil {
			return 0, fmt.Errorf("nk: sum: term %d is nil: %w", i, ErrInput)
		}
	}
	if err := checkGrad(grad, m.NumParameters()); err != nil {
		return 0, err
	}
	var eps complex128
	at := 0
	for i, t := range *m {
		var part []complex128
		if n := t.NumParameters(); grad != nil {
			part = grad[at : at+n : at+n]
			at += n
		}
		e, err := t.Permittivity(part, lambda)
		if err != nil {
			return 0, fmt.Errorf("nk: sum: term %d: %w", i, err)
		}
		eps += e
	}
	return settle("sum", grad, eps, lambda)
}

// Index returns N = n + ik; see Model.
func (m *Sum) Index(lambda float64) (complex128, error) {
	eps, err := m.Permittivity(nil, lambda)
	if err != nil {
		return 0, err
	}
	return cmplx.Sqrt(eps), nil
}

// Gradient returns the derivatives of N; see Model.
func (m *Sum) Gradient(dst []complex128, lambda float64) ([]complex128, complex128, error) {
	return gradientOf(m, dst, lambda)
}

// NumParameters returns the number of parameters of all terms.
func (m *Sum) NumParameters() int {
	n := 0
	for _, t := range *m {
		if t != nil {
			n += t.NumParameters()
		}
	}
	return n
}

// Parameters returns the parameters of all terms; the name is "2.E0" for the
// parameter E0 of the third term.
func (m *Sum) Parameters() []Parameter {
	var all []Parameter
	for i, t := range *m {
		if t == nil {
			continue
		}
		for _, p := range t.Parameters() {
			p.Name = fmt.Sprintf("%d.%s", i, p.Name)
			all = append(all, p)
		}
	}
	return all
}

// SetParameters sets the parameters of all terms, or none if one is refused.
func (m *Sum) SetParameters(v []float64) error {
	if err := checkSet("sum", v, m.NumParameters()); err != nil {
		return err
	}
	old := make([]float64, 0, len(v))
	for _, p := range m.Parameters() {
		old = append(old, p.Value)
	}
	at := 0
	for i, t := range *m {
		if t == nil {
			continue
		}
		next := at + t.NumParameters()
		if err := t.SetParameters(v[at:next]); err != nil {
			m.setBack(i, old)
			return fmt.Errorf("nk: sum: term %d: %w", i, err)
		}
		at = next
	}
	return nil
}

// setBack gives the first n terms their old values. A term whose old values are
// refused had them refused by its evaluation too, so the error says nothing new.
func (m *Sum) setBack(n int, old []float64) {
	at := 0
	for _, t := range (*m)[:n] {
		if t == nil {
			continue
		}
		next := at + t.NumParameters()
		_ = t.SetParameters(old[at:next])
		at = next
	}
}
