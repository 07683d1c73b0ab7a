package formula

import (
	"flag"
	"fmt"
	"os"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"

	"quoin/calc/expr"
)

var update = flag.Bool("update", false, "write the expected halves of the tables in testdata anew")

// A table is a text of cases: lines starting with "> " are input, the lines
// behind them up to a blank line are what is expected. Lines starting with //
// are remarks.
func runTable(t *testing.T, file string, least int, got func(input string) string) {
	t.Helper()
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	var out strings.Builder
	cases := 0
	for part := range strings.SplitSeq(strings.Trim(string(data), "\n"), "\n\n") {
		part = strings.Trim(part, "\n")
		var remarks, want strings.Builder
		input := ""
		for line := range strings.SplitSeq(part, "\n") {
			switch {
			case strings.HasPrefix(line, "//"):
				remarks.WriteString(line + "\n")
			case strings.HasPrefix(line, "> "):
				input = line[2:]
			default:
				want.WriteString(line + "\n")
			}
		}
		if input == "" {
			out.WriteString(remarks.String() + "\n")
			continue
		}
		cases++
		answer := got(input)
		out.WriteString(remarks.String() + "> " + input + "\n" + answer + "\n")
		if answer != want.String() && !*update {
			t.Errorf("%s\n> %s\ngot:\n%swant:\n%s", file, input, answer, want.String())
		}
	}
	if cases < least {
		t.Errorf("%s holds %d cases, fewer than %d", file, cases, least)
	}
	if *update {
		if err := os.WriteFile(file, []byte(strings.TrimRight(out.String(), "\n")+"\n"), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

// told lays findings out under an input that is shown behind "> ".
func told(input string, findings []Finding) string {
	var b strings.Builder
	for _, i := range findings {
		pad := utf8.RuneCountInString(input[:i.From])
		carets := max(1, utf8.RuneCountInString(input[i.From:i.To]))
		severity := ""
		if i.Warning {
			severity = "warning: "
		}
		fmt.Fprintf(&b, "  %s%s %s%s: %s\n", strings.Repeat(" ", pad), strings.Repeat("^", carets), severity, i.Code, i.Summary)
		if i.Hint != "" {
			fmt.Fprintf(&b, "    hint: %s\n", i.Hint)
		}
	}
	return b.String()
}

// print writes a tree as text that reads back as the same tree, every operation
// in brackets.
func print(n *expr.Node) string {
	args := make([]string, len(n.Args))
	for i, a := range n.Args {
		args[i] = print(a)
	}
	switch n.Op {
	case expr.Literal:
		return strings.TrimSpace(n.Text + " " + n.Unit)
	case expr.Name:
		return n.Text
	case expr.Item:
		return args[0] + "[" + args[1] + "]"
	case expr.Call:
		if n.Text == "num" {
			args = append(args, n.Unit)
		}
		return n.Text + "(" + strings.Join(args, ", ") + ")"
	case expr.List:
		return "[" + strings.Join(args, ", ") + "]"
	case expr.Neg:
		return "(-" + args[0] + ")"
	case expr.Not:
		return "(not " + args[0] + ")"
	case expr.Less, expr.AtMost, expr.More, expr.AtLeast, expr.Equal:
		return args[0] + " " + string(n.Op) + " " + args[1]
	case expr.Within:
		return args[0] + " within " + args[1]
	case expr.And, expr.Or:
		return "(" + args[0] + " " + string(n.Op) + " " + args[1] + ")"
	}
	if n.Op == expr.Pow && n.Args[0].Unit != "" && n.Args[0].Op == expr.Literal {
		args[0] = "(" + args[0] + ")"
	}
	return "(" + args[0] + " " + string(n.Op) + " " + args[1] + ")"
}

// set are the formula names of the documents in the tables.
func set(name string) bool { return name == "t" || name == "V" || name == "h_n" || name == "omega" }

func TestLines(t *testing.T) {
	runTable(t, "testdata/lines.txt", 100, func(input string) string {
		text := strings.ReplaceAll(input, `\t`, "\t")
		line, findings := ParseLine(text, set)
		if len(findings) > 0 {
			return told(text, findings)
		}
		var b strings.Builder
		switch {
		case line.Tree == nil:
			b.WriteString("  nothing\n")
		case line.Check:
			fmt.Fprintf(&b, "  check %s\n  id %q\n", print(line.Tree), line.Text)
		default:
			fmt.Fprintf(&b, "  %s = %s\n", line.Name, print(line.Tree))
		}
		if line.HasAs {
			fmt.Fprintf(&b, "  as %s, written %s\n", strconv.Quote(line.As.Text), text[line.AsFrom:line.AsTo])
		}
		if line.Source != "" {
			fmt.Fprintf(&b, "  source %q\n", line.Source)
		}
		if line.Description != "" {
			fmt.Fprintf(&b, "  description %q\n", line.Description)
		}
		return b.String()
	})
}

func TestFields(t *testing.T) {
	runTable(t, "testdata/fields.txt", 20, func(input string) string {
		n, findings := ParseExpr(input, set)
		if len(findings) > 0 {
			return told(input, findings)
		}
		return "  " + print(n) + "\n"
	})
}
