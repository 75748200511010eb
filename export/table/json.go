package table

import (
	"bytes"
	"encoding/json"
	"io"
)

// JSON writes v indented by two spaces, keys in the order of the fields (those
// of a map sorted), with a line feed at the end. Text stays as it is: < and Ω
// are not turned into escapes. Nothing is written if v cannot be.
func JSON(w io.Writer, v any) error {
	b, err := Indented(v)
	if err != nil {
		return err
	}
	_, err = w.Write(b)
	return err
}

// Indented is what JSON writes.
func Indented(v any) ([]byte, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	if err := e.Encode(v); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}
