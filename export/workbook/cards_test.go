package workbook

import (
	"fmt"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// sampled is the sample with tests at other conditions, two easy and one not.
func sampled(units int) Plan {
	p := sample(units)
	accept := limits(-39.9, 39.9)
	p.Conditions = append(p.Conditions, Condition{"cool hall", "13 °C"}, Condition{"switch on", "just switched on"})
	p.Samples = []bench.Sample{
		{Target: "warm-up drift", Output: "mixer.offset", Condition: "switch on", ChangeFrom: "bench", Every: 1, Instrument: "counter", At: "output of the mixer, C12 and ground",
			Unit: "Hz", Nominal: -12.4, Unloaded: -12.4, Expected: limits(-33.21, 8.17), Accept: &accept, Uncertainty: 0.12},
		{Target: "room drift", Output: "mixer.offset", Condition: "cool hall", ChangeFrom: "bench", Needs: "13 °C, 10 K colder than the bench", Every: 4, Instrument: "counter",
			At: "output of the mixer, C12 and ground", Unit: "Hz", Nominal: 3, Unloaded: 3, Expected: limits(-70.2, 80.1), Accept: &accept, Uncertainty: 0.12},
		{Target: "corner", Output: "detector.corner", Condition: "hand near", Every: 1, At: "detector: frequency at which the gain has fallen by 3 dB",
			Unit: "Hz", Nominal: 4823, Unloaded: 4823, Expected: limits(4300, 5400), Why: "no test point reads this"},
	}
	return p
}

// cardTexts are the printed cards, a text a page.
func cardTexts(t *testing.T, p Plan) []string {
	t.Helper()
	if _, err := exec.LookPath("pdftotext"); err != nil {
		t.Skip("pdftotext (poppler) is not installed: cards not read")
	}
	folder := office(t, saved(t, p), "pdf", true)
	made, _ := filepath.Glob(filepath.Join(folder, "*.pdf"))
	if len(made) != 1 {
		t.Fatalf("LibreOffice made %d PDF files", len(made))
	}
	text, err := exec.Command("pdftotext", "-layout", made[0], "-").Output()
	if err != nil {
		t.Fatal(err)
	}
	var cards []string
	for _, page := range strings.Split(string(text), "\f") {
		if regexp.MustCompile(`(?m)Cards .*Page \d+ of \d+`).MatchString(page) {
			cards = append(cards, page)
		}
	}
	return cards
}

// One page a unit on either paper, with its number, every step and the last
// caution on it; a sample's row on every fourth. A long bench list is printed
// smaller.
func TestCardsAreAPageEach(t *testing.T) {
	for _, tt := range []struct {
		units, more int
		paper       Paper
	}{{1, 0, Letter}, {24, 20, A4}, {200, 0, A4}, {200, 0, Letter}} {
		if testing.Short() && tt.units != 24 {
			continue
		}
		t.Run(fmt.Sprint(tt), func(t *testing.T) {
			p := long(sampled(tt.units), tt.more)
			p.Paper, p.Cards = tt.paper, true
			cards := cardTexts(t, p)
			if len(cards) != tt.units {
				t.Fatalf("%d pages of cards, want %d", len(cards), tt.units)
			}
			for i, text := range cards {
				checkCard(t, p, i+1, text)
			}
		})
	}
}

func checkCard(t *testing.T, p Plan, unit int, text string) {
	t.Helper()
	words := []string{fmt.Sprintf("unit %d of %d", unit, p.Units), "Tested by", "Date", "Instruments (serial)", "Notes", "warm-up drift", "under local electrical codes."}
	for _, r := range p.benchRows() {
		words = append(words, r.name)
	}
	for _, w := range words {
		if !strings.Contains(text, w) {
			t.Errorf("unit %d has no %q", unit, w)
		}
	}
	if cool := strings.Contains(text, "cool hall"); cool != (unit%4 == 0) {
		t.Errorf("unit %d: the cool hall is on it: %v", unit, cool)
	}
}

// The first card of three, below its headings: limits as on the test sheet,
// where a trimmer usually ends, and only the places to write in open.
func TestCardRows(t *testing.T) {
	p := sampled(3)
	p.Cards = true
	f := reopen(t, saved(t, p))
	rows, err := f.GetRows(cardsSheet)
	if err != nil {
		t.Fatal(err)
	}
	if want := "Lantern tone box · unit 1 of 3"; rows[0][0] != want {
		t.Errorf("the first card is headed %q, want %q", rows[0][0], want)
	}
	line := func(name string) (int, []string) {
		for i, r := range rows {
			if len(r) > 1 && r[1] == name {
				return i + 1, append(r, make([]string, 12)...)
			}
		}
		t.Fatalf("no row %q", name)
		return 0, nil
	}
	n, r := line("turn mixer.bias")
	if want := "turn RV1 until right; collector of Q1, to ground; usually ends at 0\u00a0%, 31–64\u00a0% of its travel"; r[2] != want {
		t.Errorf("the trim says %q, want %q", r[2], want)
	}
	if got := strings.Join(r[4:7], " "); strings.TrimSpace(got) != "mV -100  100" {
		t.Errorf("the trim is kept within %q", got)
	}
	for c := 1; c <= 12; c++ {
		if got := unlocked(t, f, cardsSheet, at(c, n)); got != (c >= 10) {
			t.Errorf("column %d of a trim can be written in: %v", c, got)
		}
	}
	n, r = line("output.level")
	if got := slices.Clone(r[4:9]); strings.Join(trimmed(got), " ") != "V 0.741 1.083 0.830 1.020" { // a tenth of U is 3.7 mV, but a twentieth of 0.19 V only 9.5 mV
		t.Errorf("the reading has %q", got)
	}
	for c := 1; c <= 12; c++ {
		if got := unlocked(t, f, cardsSheet, at(c, n)); got != (c == 10) {
			t.Errorf("column %d of a reading can be written in: %v", c, got)
		}
	}
	if _, r = line("change of mixer.offset"); r[2] != "switch on: just switched on; less what was read at bench; output of the mixer, C12 and ground" {
		t.Errorf("the change is read at %q", r[2])
	}
}

func trimmed(list []string) []string {
	for i := range list {
		list[i] = strings.TrimSpace(list[i])
	}
	return list
}

// The sample tests have a sheet where there are some; cards where they are
// asked for.
func TestSheetsOnlyWhereAsked(t *testing.T) {
	p := sampled(3)
	f := reopen(t, saved(t, p))
	if list := f.GetSheetList(); slices.Contains(list, cardsSheet) || slices.Index(list, samplesSheet) != slices.Index(list, testSheet)+1 {
		t.Errorf("sheets %v", list)
	}
	if link, target, err := f.GetCellHyperLink(summarySheet, linkTo(t, f, samplesSheet)); err != nil || !link || target != "'Sample tests'!A1" {
		t.Errorf("the summary leads to %q, %v, %v", target, link, err)
	}
	if list := reopen(t, saved(t, sample(3))).GetSheetList(); slices.Contains(list, samplesSheet) {
		t.Errorf("sheets %v", list)
	}
	var got []string
	for c := 1; c <= 11; c++ {
		got = append(got, cell(t, f, samplesSheet, at(c, 8)))
	}
	want := "room drift|change of mixer.offset, counter|cool hall: 13 °C; less what was read at bench|sample: 1 unit in 4 (13 °C, 10 K colder than the bench)|output of the mixer, C12 and ground|Hz|3|-70.2|80.1|-39.9|39.9"
	if strings.Join(got, "|") != want {
		t.Errorf("got  %s\nwant %s", strings.Join(got, "|"), want)
	}
	if units := cell(t, f, samplesSheet, at(4, 6)); units != "every unit" {
		t.Errorf("an easy test is done on %q", units)
	}
}

// An accept window's risks, in words: 2 figures of a percentage.
func TestRiskWords(t *testing.T) {
	r := sampleReadings()[10] // accepts 0.83 to 1.02 V
	r.ConsumerRisk, r.ProducerRisk, r.SpecificRisk = 0.00123, 0.0456, 0.02275
	want := "Between 0.830 and 1.020 V. Of all simulated units whose trims reached, 0.12\u00a0% are accepted and miss the target (consumer's risk), 4.6\u00a0% meet it and are not accepted (producer's risk). A unit that reads the very edge misses it with 2.3\u00a0%."
	if got := riskWords(r); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
	for x, want := range map[float64]string{0: "none", 1e-9: "less than 0.0001\u00a0%", 3.55e-6: "0.00036\u00a0%", 0.5: "50\u00a0%", 0.99999: "more than 99.99\u00a0%"} {
		if got := chance(x); got != want {
			t.Errorf("chance(%g) = %q, want %q", x, got, want)
		}
	}
	p := sample(1)
	p.Readings[10] = r
	rows, err := reopen(t, saved(t, p)).GetRows(basisSheet)
	if err != nil {
		t.Fatal(err)
	}
	if !slices.ContainsFunc(rows, func(r []string) bool { return len(r) > 1 && r[0] == "output.level" && r[1] == want }) {
		t.Error("the basis has no risks of output.level")
	}
}

// Where trimmers end close to an end, and the middle of them.
func TestNearEndWords(t *testing.T) {
	r := spread.TrimReport{NearLow: 0.012, NearHigh: 0.001, Setting: spread.TrimSetting{Median: 0.52, P01: 0.09, P99: 0.93}}
	if got := nearEnds(r); got != "1.3\u00a0%, at 0\u00a0%" {
		t.Errorf("got %q", got)
	}
	if got := ends(r); got != "52\u00a0%, 9–93\u00a0%" {
		t.Errorf("got %q", got)
	}
}

// The last digit is the first power of ten not below U/10, unless a window
// asks for another: a counter's U of 7.64 Hz at 331 kHz gives 1 Hz, a meter's
// of 35.3 mV 10 mV, of 2.3 mV 1 mV. A window of 60 mV allows no more than 3 mV.
func TestReadingDigits(t *testing.T) {
	for _, tt := range []struct {
		u, largest float64
		unit       string
		windows    []float64
		decimals   int
		symbol     string
	}{
		{7.64, 331e3, "Hz", []float64{900}, 3, "kHz"},
		{7.64, 331e3, "Hz", []float64{20e3}, 2, "kHz"}, // a thousandth of the window is 20 Hz
		{0.0353, 5.7, "V", []float64{0.4}, 2, "V"},
		{0.0353, 5.7, "V", []float64{0.06}, 3, "V"},
		{0.0023, 0.04, "V", []float64{0.1}, 0, "mV"},
		{0.1, 12, "V", []float64{1}, 2, "V"}, // just a tenth
	} {
		s := readingScale(tt.unit, tt.u, tt.largest, tt.windows...)
		if s.decimals != tt.decimals || s.symbol != tt.symbol {
			t.Errorf("U = %g, windows %v: %d decimals of %s, want %d of %s", tt.u, tt.windows, s.decimals, s.symbol, tt.decimals, tt.symbol)
		}
	}
}

// linkTo is the summary's cell with a sheet's name.
func linkTo(t *testing.T, f *excelize.File, sheet string) string {
	t.Helper()
	found, err := f.SearchSheet(summarySheet, sheet)
	if err != nil || len(found) != 1 {
		t.Fatalf("%s stands in %v of the summary (%v)", sheet, found, err)
	}
	return found[0]
}
