package page

import (
	"encoding/base64"
	"errors"
	"fmt"
	"html/template"
	"reflect"
	"strings"
	"unicode/utf8"

	"github.com/Masterminds/sprig/v3"

	"quoin/calc/diag"
)

// OwnFunction is a function that the templates of an office have.
type OwnFunction struct{ Name, Usage, Doc string }

// OwnFunctions are all of them: a few of sprig, none of which looks at the clock,
// chance, files or the machine, and those of the language of templates that can
// neither grow nor repeat a text without bound.
var OwnFunctions = []OwnFunction{
	{"picture", `<img src="{{picture "logo.svg"}}" alt="..." style="height: 14mm">`, "a picture of the folder; the one thing that src can hold"},
	{"trim", "{{.Client | trim}}", "the text without blanks at its ends"},
	{"upper", "{{.Client | upper}}", "the text in capitals"},
	{"lower", "{{.Client | lower}}", "the text in small letters"},
	{"title", "{{.Client | title}}", "the text with a capital at the start of each word"},
	{"initials", "{{.Client | initials}}", "the first letters of the words"},
	{"replace", `{{.Number | replace "-" " "}}`, "the text with each first text replaced by the second"},
	{"trimPrefix", `{{.Revision | trimPrefix "Rev "}}`, "the text without this at its start"},
	{"trimSuffix", `{{.Client | trimSuffix " Ltd"}}`, "the text without this at its end"},
	{"trunc", "{{.Client | trunc 40}}", "the text cut to this many characters"},
	{"abbrev", "{{.Client | abbrev 40}}", "the text cut to this many characters, with dots"},
	{"contains", `{{if contains "plot" .Location}}`, "whether the second text holds the first"},
	{"hasPrefix", `{{if hasPrefix "MC-" .Number}}`, "whether the second text begins with the first"},
	{"hasSuffix", `{{if hasSuffix "-S" .Number}}`, "whether the second text ends with the first"},
	{"splitList", `{{range splitList ", " .Location}}`, "the second text cut at the first, as a list"},
	{"list", `{{join " · " (list .Project .Location)}}`, "a list of texts"},
	{"compact", `{{list .Client .Location | compact}}`, "the list without what is empty"},
	{"join", `{{.Basis | join "; "}}`, "the texts of a list with a text between them"},
	{"first", "{{.Basis | first}}", "the first text of a list"},
	{"last", "{{.Basis | last}}", "the last text of a list"},
	{"default", `{{.Client | default "client not given"}}`, "the text, or this where it is empty"},
	{"ternary", `{{ternary "one" "several" (eq (len .Basis) 1)}}`, "the first text where the condition holds, else the second"},
	{"empty", "{{if empty .Client}}", "whether a text or list is empty"},
	{"len", "{{len .Basis}}", "how many"},
	{"and", "{{if and .Client .Location}}", "whether all hold"},
	{"or", "{{or .Client .Project}}", "the first that is not empty"},
	{"not", "{{if not .Client}}", "the opposite"},
	{"eq", "{{if eq .Sheet 1}}", "whether two are equal"},
	{"ne", "{{if ne .Sheet 1}}", "whether two differ"},
	{"lt", "{{if lt .Sheet 3}}", "whether the first is less"},
	{"le", "{{if le .Sheet 3}}", "whether the first is less or equal"},
	{"gt", "{{if gt .Sheet 3}}", "whether the first is greater"},
	{"ge", "{{if ge .Sheet 3}}", "whether the first is greater or equal"},
}

func ownNames() []string {
	out := make([]string, len(OwnFunctions))
	for i, f := range OwnFunctions {
		out[i] = f.Name
	}
	return out
}

// Bounds of what functions take, give and repeat.
const (
	mostText   = 16 << 10
	mostRepeat = 20000
)

var errBudget = fmt.Errorf("the template repeats more than %d times", mostRepeat)

// budget counts what a template repeats, in one go.
type budget struct{ used int }

// counted lets a range have its list, and counts its items.
func (c *budget) counted(list any) ([]any, error) {
	v := reflect.ValueOf(list)
	if v.Kind() != reflect.Slice {
		return nil, errors.New("range takes a list")
	}
	if c.used += 1 + v.Len(); c.used > mostRepeat {
		return nil, errBudget
	}
	out := make([]any, v.Len())
	for i := range out {
		out[i] = v.Index(i).Interface()
	}
	return out, nil
}

// bounded refuses texts that are too long, or cut within a character.
func bounded(texts ...string) error {
	sum := 0
	for _, t := range texts {
		sum += len(t)
		if !utf8.ValidString(t) {
			return errors.New("this cuts a character in two")
		}
	}
	if sum > mostText {
		return fmt.Errorf("a text is longer than %d KiB", mostText>>10)
	}
	return nil
}

// hermetic is what we take functions from.
var hermetic = sprig.HermeticTxtFuncMap()

// ofSprig is a function of sprig with its texts bounded.
func ofSprig(name string) any {
	switch call := hermetic[name].(type) {
	case func(string) string:
		return func(s string) (string, error) {
			if err := bounded(s); err != nil {
				return "", err
			}
			s = call(s)
			return s, bounded(s)
		}
	case func(int, string) string:
		return func(n int, s string) (string, error) {
			if n < 4 || n > 10000 {
				return "", errors.New("the number of characters is from 4 to 10000")
			}
			if err := bounded(s); err != nil {
				return "", err
			}
			s = call(n, s)
			return s, bounded(s)
		}
	case func(string, string) string:
		return func(a, s string) (string, error) {
			if err := bounded(a, s); err != nil {
				return "", err
			}
			s = call(a, s)
			return s, bounded(s)
		}
	case func(string, string) bool:
		return func(a, s string) (bool, error) { return call(a, s), bounded(a, s) }
	case func(string, string, string) string:
		return func(a, b, s string) (string, error) {
			if err := bounded(a, b, s); err != nil {
				return "", err
			}
			if n := (strings.Count(s, a) + 1) * len(b); n > mostText {
				return "", fmt.Errorf("a text is longer than %d KiB", mostText>>10)
			}
			s = call(a, b, s)
			return s, bounded(s)
		}
	}
	panic("page: " + name + " of sprig has a form that is not known here")
}

// ownFuncs is every function of a template. Lists are of texts alone: none holds
// another.
func (b *book) ownFuncs(c *budget) template.FuncMap {
	out := template.FuncMap{
		"counted": c.counted,
		"picture": b.ownPicture,
		"splitList": func(sep, s string) ([]string, error) {
			return strings.Split(s, sep), bounded(s)
		},
		"list": func(texts ...string) ([]string, error) { return texts, bounded(texts...) },
		"compact": func(texts []string) (out []string) {
			for _, t := range texts {
				if strings.TrimSpace(t) != "" {
					out = append(out, t)
				}
			}
			return out
		},
		"join": func(sep string, texts []string) (string, error) {
			if err := bounded(texts...); err != nil {
				return "", err
			}
			if len(sep)*len(texts) > mostText {
				return "", bounded(strings.Repeat(" ", mostText+1))
			}
			s := strings.Join(texts, sep)
			return s, bounded(s)
		},
		"first": func(texts []string) string {
			if len(texts) == 0 {
				return ""
			}
			return texts[0]
		},
		"last": func(texts []string) string {
			if len(texts) == 0 {
				return ""
			}
			return texts[len(texts)-1]
		},
		"default": func(other, s string) string { return or(s, other) },
		"ternary": func(yes, no string, when bool) string {
			if when {
				return yes
			}
			return no
		},
		"empty": func(v any) bool {
			switch v := v.(type) {
			case string:
				return strings.TrimSpace(v) == ""
			case []string:
				return len(v) == 0
			}
			return v == nil
		},
	}
	for _, name := range []string{"trim", "upper", "lower", "title", "initials", "replace", "trimPrefix", "trimSuffix", "trunc", "abbrev", "contains", "hasPrefix", "hasSuffix"} {
		out[name] = ofSprig(name)
	}
	return out
}

// ownPicture is a picture of the folder as data.
func (b *book) ownPicture(name string) (template.URL, error) {
	var names []string
	for _, f := range b.p.Office.Files {
		if !strings.HasPrefix(f.MediaType, "image/") {
			continue
		}
		if f.Name == name {
			return template.URL("data:" + f.MediaType + ";base64," + base64.StdEncoding.EncodeToString(f.Data)), nil
		}
		names = append(names, f.Name)
	}
	if near := diag.Nearest(name, names); near != "" {
		return "", fmt.Errorf("the folder has no picture %s; did you mean %s?", clip(name, 60), near)
	}
	return "", fmt.Errorf("the folder has no picture %s", clip(name, 60))
}
