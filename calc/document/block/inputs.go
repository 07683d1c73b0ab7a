package block

import (
	"quoin/calc/diag"
	"quoin/calc/document/field"
)

// InputRow is a named value of a table of inputs; what is not there is empty.
type InputRow struct{ Name, Value, Unit, Source, Description field.Item }

// inputsEnv reads a table as values of the document.
type inputsEnv struct{ Env }

func (e inputsEnv) Read(path, _ string) ([]byte, string, error) { return e.Env.Read(path, "values") }

// InputRows reads a table with the columns name and value, and perhaps unit, source
// and description.
func InputRows(env Env, f field.Field) ([]InputRow, diag.List) {
	r := &Run{Env: inputsEnv{env}, Place: f.At}
	s := r.readSheet(f, field.Field{}, field.Field{})
	if s == nil {
		return nil, r.Diags
	}
	for _, need := range []string{"name", "value"} {
		if s.find(need) == nil {
			r.Diags.Errorf("missing-column", s.columns[0].at, "there is no column %s", need).WithHint("the columns are name, value, and perhaps unit, source and description")
		}
	}
	for _, c := range s.columns {
		switch c.name {
		case "name", "value", "unit", "source", "description":
		default:
			r.Diags.Errorf("table-head", c.at, "inputs have no column %s", c.name).WithHint("the columns are name, value, and perhaps unit, source and description")
		}
	}
	if r.Diags.HasErrors() {
		return nil, r.Diags
	}
	rows := make([]InputRow, len(s.columns[0].cells))
	for i := range rows {
		row := &rows[i]
		for _, c := range []struct {
			name string
			to   *field.Item
		}{{"name", &row.Name}, {"value", &row.Value}, {"unit", &row.Unit}, {"source", &row.Source}, {"description", &row.Description}} {
			if col := s.find(c.name); col != nil {
				*c.to = field.Item{Text: col.cells[i].text, At: col.cells[i].at}
			}
		}
	}
	return rows, r.Diags
}
