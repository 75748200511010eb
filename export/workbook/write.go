package workbook

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"sort"

	"github.com/xuri/excelize/v2"
)

// The sheets, in the order of their tabs.
const (
	summarySheet    = "Summary"
	buySheet        = "Parts to buy"
	stagesSheet     = "Parts by stage"
	trimsSheet      = "Trims"
	testSheet       = "Test sheet"
	samplesSheet    = "Sample tests" // only where the plan has some
	cardsSheet      = "Cards"        // only where they are asked for
	tolerancesSheet = "Tolerances"
	driftSheet      = "Drift"
	compareSheet    = "Compare" // only where the plan has one
	tradeSheet      = "Trade"   // likewise
	basisSheet      = "Basis"
	carrierSheet    = "_plan" // never shown
)

// Write lays out the plan and writes it as an .xlsx file. Nothing is written
// to w unless the whole workbook could be made.
func Write(w io.Writer, p Plan) error {
	if err := p.valid(); err != nil {
		return err
	}
	absent := map[string]bool{compareSheet: p.Compare == nil, tradeSheet: p.Trade == nil, samplesSheet: len(p.Samples) == 0, cardsSheet: !p.Cards}
	var names []string
	for _, name := range []string{summarySheet, buySheet, stagesSheet, trimsSheet, testSheet, samplesSheet, cardsSheet, tolerancesSheet, driftSheet, compareSheet, tradeSheet, basisSheet, carrierSheet} {
		if !absent[name] {
			names = append(names, name)
		}
	}
	b := newBook(p, names)
	defer b.file.Close()
	b.keep(b.file.SetSheetVisible(carrierSheet, false, true)) // before any sheet is streamed
	b.properties("Batch plan")
	// The summary is the first tab but written late: it points into the others.
	total := b.buy()
	b.byStage()
	b.trims()
	verdicts := b.test()
	b.samples()
	b.cards()
	b.tolerances()
	b.drift()
	b.compare()
	b.trade()
	b.basis()
	b.summary(total, verdicts)
	b.carriers()
	return b.write(w)
}

// write packs the book and hands it over, if all of it could be laid out.
func (b *book) write(w io.Writer) error {
	if b.err != nil {
		return fmt.Errorf("the workbook could not be laid out: %w", b.err)
	}
	whole, err := b.bytes()
	if err != nil {
		return fmt.Errorf("the workbook could not be packed: %w", err)
	}
	_, err = w.Write(whole)
	return err
}

// book is a workbook being laid out. The first error stays; what follows is
// not worth looking at, and Write reports the first.
type book struct {
	plan   Plan
	file   *excelize.File
	styles map[look]int
	err    error
}

// newBook has empty sheets, in the order of their tabs.
func newBook(p Plan, names []string) *book {
	b := &book{plan: p, file: excelize.NewFile(), styles: map[look]int{}}
	b.keep(b.file.SetSheetName("Sheet1", names[0]))
	for _, name := range names[1:] {
		_, err := b.file.NewSheet(name)
		b.keep(err)
	}
	b.keep(b.file.SetDefaultFont(font))
	return b
}

func (b *book) keep(err error) {
	if b.err == nil {
		b.err = err
	}
}

// properties fixes what excelize would otherwise fill with a date and a name
// of its own. LibreOffice trusts cached results only from programs it does not
// know, and Excel is told to work everything out when it opens the file.
func (b *book) properties(subject string) {
	const made = "1980-01-01T00:00:00Z" // one date for all: same plan, same bytes
	b.keep(b.file.SetDocProps(&excelize.DocProperties{
		Title: cut(clean(b.plan.Title), 200), Subject: subject, Creator: "batchwright", LastModifiedBy: "batchwright",
		Created: made, Modified: made, Language: "en", Revision: "1",
	}))
	b.keep(b.file.SetAppProps(&excelize.AppProperties{Application: "batchwright", AppVersion: "1.0"}))
	always := true
	b.keep(b.file.SetCalcProps(&excelize.CalcPropsOptions{FullCalcOnLoad: &always}))
}

// bytes packs the file the same way every time.
func (b *book) bytes() ([]byte, error) {
	// The types of pictures come from a Go map as soon as there is a chart.
	defaults := b.file.ContentTypes.Defaults
	sort.Slice(defaults, func(i, j int) bool { return defaults[i].Extension < defaults[j].Extension })
	b.file.SetZipWriter(func(w io.Writer) excelize.ZipWriter { return &zipped{w: w} })
	var whole bytes.Buffer
	if err := b.file.Write(&whole); err != nil {
		return nil, err
	}
	if whole.Len() == 0 {
		return nil, errors.New("it came out empty")
	}
	return whole.Bytes(), nil
}
