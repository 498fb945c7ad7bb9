package table

import (
	"context"
	"strings"
	"testing"

	"lobewright/app/study"
	"lobewright/app/work"
	"lobewright/assets"
	"lobewright/orbitals/structure"
)

func TestALedgerIsWrittenInEachFormat(t *testing.T) {
	w := work.New(structure.Inputs{Demo: assets.Demos()})
	l, err := w.Ledger(context.Background(), study.Study{Structure: "demo:water", Basis: []string{"H:s"}, Projection: study.Projection{Function: 1, Irrep: "B2"}})
	if err != nil {
		t.Fatal(err)
	}
	g := LedgerGrid(l, assets.TextsIn(assets.English).Say)
	if got, want := g.CSV(), `class,operation,image,weight,sum so far
E,E,φ1,1,φ1
C2,C2(z),φ2,-1,φ1 − φ2
σv(xz),σv(xz),φ2,-1,φ1 − 2 φ2
σv'(yz),σv'(yz),φ1,1,2 φ1 − 2 φ2
`; got != want {
		t.Errorf("%s\nwant\n%s", got, want)
	}
	latex := g.LaTeX()
	for _, want := range []string{
		`Projection of $\varphi _{1}$ (s on H2) onto B$_{2}$, weighed with the matrix element 1,1`,
		`$\sigma _{\mathrm{v}}'(yz)$ & $\sigma _{\mathrm{v}}'(yz)$ & $\varphi _{1}$ & $1$ & $2 \varphi _{1} - 2 \varphi _{2}$ \\`,
		`The sum has the length 2$\sqrt{2}$ = 2.828; made of length 1 it is ($\varphi _{1}$ $-$ $\varphi _{2}$)/$\sqrt{2}$.`,
	} {
		if !strings.Contains(latex, want) {
			t.Errorf("there is no %s in\n%s", want, latex)
		}
	}
}
