package lateral

import "quoin/calc/cite"

// Clauses are the numbers of the equations of one edition.
type Clauses struct {
	Key                            string
	Shear                          string // V
	Spectrum                       string // C_s from the multi-period spectrum; empty where there is none
	Plateau, Velocity, Displaced   string // C_s by S_DS, S_D1, S_D1 T_L
	Minimum, Least                 string // 0.044 S_DS I_e; 0.5 S_1/(R/I_e)
	Approximate, Force, Share, Sum string
	Storeys, Walls, Area           string // T_a = 0.1 N; T_a of walls; C_w
}

var (
	clauses722 = Clauses{"ASCE/SEI 7-22", "Eq. 12.8-1", "Eq. 12.8-2", "Eq. 12.8-3", "Eq. 12.8-4", "Eq. 12.8-5", "Eq. 12.8-6", "Eq. 12.8-7", "Eq. 12.8-8", "Eq. 12.8-12", "Eq. 12.8-13", "Eq. 12.8-14",
		"Eq. 12.8-9", "Eq. 12.8-10", "Eq. 12.8-11"}
	clauses716 = Clauses{"ASCE/SEI 7-16", "Eq. 12.8-1", "", "Eq. 12.8-2", "Eq. 12.8-3", "Eq. 12.8-4", "Eq. 12.8-5", "Eq. 12.8-6", "Eq. 12.8-7", "Eq. 12.8-11", "Eq. 12.8-12", "Eq. 12.8-13",
		"Eq. 12.8-8", "Eq. 12.8-9", "Eq. 12.8-10"}
)

// clausesOf gives the numbers of a basis; it panics on one that has none.
func clausesOf(basis string) Clauses {
	for _, c := range []Clauses{clauses722, clauses716} {
		if c.Key == basis {
			return c
		}
	}
	panic("lateral: no clauses of " + basis)
}

// ClausesOf gives the numbers of the equations of an edition of ASCE/SEI 7.
func ClausesOf(basis string) Clauses { return clausesOf(basis) }

// ref points to a clause of the edition.
func (c Clauses) ref(clause string) cite.Ref { return cite.To(c.Key, clause) }

// Ref points to a clause of the edition.
func (c Clauses) Ref(clause string) cite.Ref { return c.ref(clause) }
