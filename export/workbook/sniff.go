package workbook

import (
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"unicode/utf8"
)

// sniff says what a file is that is no workbook, from its first bytes; nil
// where it may be one.
func sniff(file []byte) error {
	const save = "; open it in a spreadsheet program and save it as .xlsx"
	start := bytes.ToLower(bytes.TrimSpace(bytes.TrimPrefix(file[:min(len(file), 512)], []byte("\ufeff"))))
	switch {
	case len(file) == 0:
		return errors.New("the file is empty")
	case bytes.HasPrefix(file, []byte("\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1")): // MS-CFB 2.2, the header's signature
		return errors.New("an old .xls file or one with a password" + save + " without a password")
	case bytes.HasPrefix(file, []byte("PK\x05\x06")):
		return errors.New("an empty archive")
	case bytes.HasPrefix(file, []byte("PK\x03\x04")):
		return nil
	case bytes.HasPrefix(start, []byte("<!doctype html")), bytes.HasPrefix(start, []byte("<html")):
		return errors.New("a web page, not a workbook")
	case bytes.HasPrefix(start, []byte("<?xml")), bytes.HasPrefix(start, []byte("<")):
		return errors.New("an XML file, not a workbook" + save)
	case bytes.HasPrefix(start, []byte("%pdf")):
		return errors.New("a PDF: readings come back in the workbook itself")
	case utf8.Valid(file[:min(len(file), 400)]) || !bytes.ContainsRune(file[:min(len(file), 512)], 0):
		return errors.New("a text file; readings in a text file are given with --readings FILE.csv")
	}
	return errors.New("not a workbook of any kind known here" + save)
}

// archive opens a file as a zip archive and says what it is if it holds
// something other than a workbook.
func archive(file []byte) (*zip.Reader, error) {
	z, err := zip.NewReader(bytes.NewReader(file), int64(len(file)))
	if err != nil {
		return nil, errors.New("a damaged or truncated workbook: the archive's list of contents cannot be read")
	}
	if len(z.File) > mostParts {
		return nil, fmt.Errorf("%d parts in the archive; a workbook of ours has at most %d", len(z.File), mostParts)
	}
	has := map[string]bool{}
	for _, part := range z.File {
		if has[part.Name] {
			return nil, fmt.Errorf("the part %s is there twice", quoted(part.Name))
		}
		has[part.Name] = true
	}
	switch {
	case has["mimetype"]:
		return nil, errors.New("an OpenDocument file; save it as .xlsx")
	case has["word/document.xml"]:
		return nil, errors.New("a text document, not a workbook")
	case has["xl/workbook.bin"]:
		return nil, errors.New("a binary workbook (.xlsb); save it as .xlsx")
	case !has["[Content_Types].xml"] || !has["xl/workbook.xml"]:
		return nil, errors.New("an archive without a workbook in it, or one that has lost parts")
	}
	return z, nil
}

// quoted shows a text from a foreign file: short, clean, in quotes.
func quoted(s string) string { return fmt.Sprintf("%q", cut(clean(s), 60)) }
