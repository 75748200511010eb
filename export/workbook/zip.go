package workbook

import (
	"archive/zip"
	"bytes"
	"errors"
	"io"
	"io/fs"
	"slices"
	"strings"
	"time"
)

// zipped holds a workbook's parts until all are known and writes them in one
// order with one date: excelize hands them over in the order of a Go map.
type zipped struct {
	w     io.Writer
	parts []zipPart
}

type zipPart struct {
	name string
	data *bytes.Buffer
}

// epoch is the date of every part, the first a zip file can say.
var epoch = time.Date(1980, 1, 1, 0, 0, 0, 0, time.UTC)

// Create takes a part's name and hands back where to write it.
func (z *zipped) Create(name string) (io.Writer, error) {
	part := zipPart{name, new(bytes.Buffer)}
	z.parts = append(z.parts, part)
	return part.data, nil
}

// AddFS is asked for by excelize's interface and never called by it.
func (z *zipped) AddFS(fs.FS) error {
	return errors.New("workbook: a file system cannot be added")
}

// Close writes the parts, the list of content types first as readers expect.
func (z *zipped) Close() error {
	const first = "[Content_Types].xml"
	slices.SortFunc(z.parts, func(a, b zipPart) int {
		if (a.name == first) != (b.name == first) {
			if a.name == first {
				return -1
			}
			return 1
		}
		return strings.Compare(a.name, b.name)
	})
	out := zip.NewWriter(z.w)
	for _, part := range z.parts {
		w, err := out.CreateHeader(&zip.FileHeader{Name: part.name, Method: zip.Deflate, Modified: epoch})
		if err != nil {
			return err
		}
		if _, err := w.Write(part.data.Bytes()); err != nil {
			return err
		}
	}
	return out.Close()
}
