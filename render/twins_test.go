package render

import (
	"go/ast"
	"go/parser"
	"go/token"
	"go/types"
	"testing"
)

// Processors of other kinds have a stand-in for every function of the
// assembly, with the same types.
func TestEveryKernelHasAStandIn(t *testing.T) {
	kernels := func(path string) map[string]string {
		file, err := parser.ParseFile(token.NewFileSet(), path, nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		m := map[string]string{}
		for _, d := range file.Decls {
			f, ok := d.(*ast.FuncDecl)
			if !ok {
				continue
			}
			sign := ""
			for _, p := range f.Type.Params.List {
				for range max(1, len(p.Names)) {
					sign += types.ExprString(p.Type) + ","
				}
			}
			if f.Type.Results != nil {
				for _, p := range f.Type.Results.List {
					sign += " " + types.ExprString(p.Type)
				}
			}
			m[f.Name.Name] = sign
		}
		return m
	}
	amd64, other := kernels("kernel_amd64.go"), kernels("kernel_other.go")
	if len(amd64) == 0 || len(amd64) != len(other) {
		t.Errorf("%d kernels, %d stand-ins", len(amd64), len(other))
	}
	for name, sign := range amd64 {
		if other[name] != sign {
			t.Errorf("%s(%s) has the stand-in (%s)", name, sign, other[name])
		}
	}
}
