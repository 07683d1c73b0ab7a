package page

import "reflect"

// DataOf is the data of a template of an office, as its reference shows it.
type DataOf struct {
	File, Doc string
	Fields    []DataField
}

// DataField is a field of the data.
type DataField struct{ Name, Doc string }

// OfficeData is the data of every template. The program's own templates have the same.
func OfficeData() []DataOf {
	fields := func(data any) (out []DataField) {
		t := reflect.TypeOf(data)
		for i := range t.NumField() {
			if doc := t.Field(i).Tag.Get("doc"); doc != "" {
				out = append(out, DataField{t.Field(i).Name, doc})
			}
		}
		return out
	}
	return []DataOf{
		{"head.html", "what the head of a sheet can show; it must show Project, Number, Date, Prepared and Checked", fields(Head{})},
		{"cover.html", "what the top of the cover can show; it must show Title, Project and Number", fields(Cover{})},
	}
}
