package main

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"quoin/calc/diag"
)

// kebab is the form of a code.
var kebab = regexp.MustCompile(`^[a-z]+(-[a-z0-9]+)*$`)

// silent are codes of warnings that the page prints among its cautions, and no
// terminal says.
var silent = []string{"two-period"}

// TestCodes holds the list of codes to the source: every code that is given
// anywhere is in the list, and every code of the list is given somewhere.
func TestCodes(t *testing.T) {
	given := map[string]string{}
	for _, e := range emissions(t) {
		given[e.code] = e.place
	}
	if len(given) == 0 {
		t.Fatal("no codes found")
	}
	listed := map[string]bool{}
	for i, c := range diag.Codes {
		listed[c.Code] = true
		if i > 0 && diag.Codes[i-1].Code >= c.Code {
			t.Errorf("%s is out of order", c.Code)
		}
		if !kebab.MatchString(c.Code) {
			t.Errorf("%q is no code: small letters, joined by hyphens", c.Code)
		}
		for _, text := range []string{c.Cause, c.Remedy} {
			if len(text) < 10 || !strings.HasSuffix(text, ".") {
				t.Errorf("%s: cause and remedy are a sentence each, not %q", c.Code, text)
			}
		}
		if given[c.Code] == "" {
			t.Errorf("%s is in the list, and nothing gives it", c.Code)
		}
	}
	for code, place := range given {
		if !listed[code] && !slices.Contains(silent, code) {
			t.Errorf("%s: %s is not in diag.Codes", place, code)
		}
	}
	for _, code := range silent {
		if given[code] == "" || listed[code] {
			t.Errorf("%s is silent, and is listed or never given", code)
		}
	}
}

// emission is a place of the source that gives a code to a message.
type emission struct{ code, place string }

// emissions scans the source of the program. A code is the argument of a
// parameter named code, or the field Code of a composite literal. It stands
// there as a literal, or is handed on from a variable or field of that name.
func emissions(t *testing.T) []emission {
	t.Helper()
	s := scan{t: t, set: token.NewFileSet(), takes: map[string]int{}, fields: map[string]int{}}
	files := map[string][]*ast.File{} // by folder
	for _, top := range []string{"calc", "render", "cmd"} {
		err := filepath.WalkDir(filepath.Join(module, top), func(path string, d fs.DirEntry, err error) error {
			if err != nil || d.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
				return err
			}
			f, err := parser.ParseFile(s.set, path, nil, 0)
			files[filepath.Dir(path)] = append(files[filepath.Dir(path)], f)
			return err
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	for _, look := range []func(string) func(ast.Node) bool{s.declared, s.used} {
		for dir, list := range files {
			for _, f := range list {
				ast.Inspect(f, look(dir))
			}
		}
	}
	return s.out
}

type scan struct {
	t   *testing.T
	set *token.FileSet
	// takes is where the code stands among the parameters of a function, by
	// folder and name; exported ones are known everywhere, under no folder, and
	// those written out within a file there only (-1: one that takes none).
	takes map[string]int
	// fields is where Code stands among the fields of a struct type, by name.
	fields map[string]int
	out    []emission
}

// local is the key of a function that is written out and named within a file.
func (s *scan) local(at token.Pos, name string) string {
	return s.set.Position(at).Filename + " " + name
}

func key(dir, name string) string {
	if ast.IsExported(name) {
		return name
	}
	return dir + " " + name
}

// declared learns the functions and types that take a code.
func (s *scan) declared(dir string) func(ast.Node) bool {
	learn := func(key string, f *ast.FuncType) {
		at := 0
		for _, p := range f.Params.List {
			for _, n := range p.Names {
				if n.Name == "code" {
					s.takes[key] = at
				}
				at++
			}
		}
	}
	return func(n ast.Node) bool {
		switch x := n.(type) {
		case *ast.FuncDecl:
			learn(key(dir, x.Name.Name), x.Type)
		case *ast.AssignStmt:
			for i, right := range x.Rhs {
				f, ok := right.(*ast.FuncLit)
				if name, named := x.Lhs[min(i, len(x.Lhs)-1)].(*ast.Ident); ok && named {
					local := s.local(x.Pos(), name.Name)
					s.takes[local] = -1
					learn(local, f.Type)
				}
			}
		case *ast.TypeSpec:
			if st, ok := x.Type.(*ast.StructType); ok {
				at := 0
				for _, f := range st.Fields.List {
					for _, n := range f.Names {
						if strings.EqualFold(n.Name, "code") {
							s.fields[x.Name.Name] = at
						}
						at++
					}
				}
			}
		}
		return true
	}
}

// used finds the codes given.
func (s *scan) used(dir string) func(ast.Node) bool {
	return func(n ast.Node) bool {
		switch x := n.(type) {
		case *ast.CallExpr:
			name, local := "", ""
			switch f := x.Fun.(type) {
			case *ast.Ident:
				name, local = f.Name, s.local(x.Pos(), f.Name)
			case *ast.SelectorExpr:
				if pkg, ok := f.X.(*ast.Ident); ok && pkg.Name == "fmt" {
					return true
				}
				name = f.Sel.Name
			}
			at, ok := s.takes[local]
			if !ok {
				at, ok = s.takes[key(dir, name)]
			}
			if ok && at >= 0 && at < len(x.Args) {
				s.give(x.Args[at])
			}
		case *ast.CompositeLit:
			kind := x.Type
			if list, ok := kind.(*ast.ArrayType); ok {
				kind = list.Elt
				for _, e := range x.Elts {
					if inner, ok := e.(*ast.CompositeLit); ok && inner.Type == nil {
						s.literal(kind, inner)
					}
				}
				return true
			}
			s.literal(kind, x)
		}
		return true
	}
}

// literal takes the code of a struct written out.
func (s *scan) literal(kind ast.Expr, x *ast.CompositeLit) {
	name := ""
	switch k := kind.(type) {
	case *ast.Ident:
		name = k.Name
	case *ast.SelectorExpr:
		name = k.Sel.Name
	}
	at, ok := s.fields[name]
	if !ok || name == "Code" { // the list itself
		return
	}
	for i, e := range x.Elts {
		if kv, keyed := e.(*ast.KeyValueExpr); keyed {
			if k, ok := kv.Key.(*ast.Ident); ok && strings.EqualFold(k.Name, "code") {
				s.give(kv.Value)
			}
		} else if i == at {
			s.give(e)
		}
	}
}

func (s *scan) give(e ast.Expr) {
	place := s.set.Position(e.Pos()).String()
	switch x := e.(type) {
	case *ast.BasicLit:
		if code, err := strconv.Unquote(x.Value); err == nil {
			s.out = append(s.out, emission{code, place})
		}
		return
	case *ast.Ident:
		if x.Name == "code" {
			return
		}
	case *ast.SelectorExpr:
		if strings.EqualFold(x.Sel.Name, "code") {
			return
		}
	}
	s.t.Errorf("%s: a code is written as a literal where a message is made", place)
}
