package plan

import (
	"fmt"
	"strings"

	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/bench/explain"
)

// ComposeReviewed makes the workbook of a review. What was read of the file
// `from` is filled and turned; good is what good units read, by point.
func ComposeReviewed(w Work, r Review, filled, turned bench.Filled, good map[string][]float64, from string) workbook.Reviewed {
	out := workbook.Reviewed{
		Title: r.Build, Digest: r.Plan, Version: w.Version, From: from,
		Summary: summarised(w, r), Units: reviewedUnits(w, r),
		Turns: w.Sheet.Turns, Readings: w.Sheet.Readings, Filled: filled, Turned: turned, Good: good,
		Batch: BatchSentences(r), Lots: LotSentences(r.Batch), Rest: RestSentences(r.Batch),
	}
	for i, p := range r.Batch.Points {
		x := workbook.ReviewedPoint{Units: p.Units, Mean: p.Mean, Expected: p.ExpectedMean, Shift: p.ShiftScore, Ratio: p.SpreadRatio, Slope: p.Slope,
			Remark: remarkText(p, w.Sheet.Readings[i].Unit)}
		out.Points = append(out.Points, x)
	}
	return out
}

// summarised are sentences for the first page.
func summarised(w Work, r Review) []string {
	wrong := 0
	for _, u := range r.Units {
		if !u.Good() {
			wrong++
		}
	}
	first := fmt.Sprintf("%d of %s read; ", len(r.Units), many(w.Build.Units, "unit"))
	if wrong == 0 {
		first += "every one is as it should be."
	} else {
		first += fmt.Sprintf("%d not as they should be, or not read to the end.", wrong)
	}
	list := append([]string{first}, LotSentences(r.Batch)...)
	list = append(list, RestSentences(r.Batch)...)
	if r.Workbook != nil && len(r.Workbook.Findings) > 0 {
		list = append(list, fmt.Sprintf("%s on the filled sheet itself: review prints them by cell.", capital(many(len(r.Workbook.Findings), "finding"))))
	}
	return list
}

// reviewedUnits has every unit of the batch, those not read too.
func reviewedUnits(w Work, r Review) []workbook.ReviewedUnit {
	var list []workbook.ReviewedUnit
	read := map[int]ReviewUnit{}
	for _, u := range r.Units {
		read[u.Unit] = u
	}
	for n := 1; n <= w.Build.Units; n++ {
		u, there := read[n]
		if !there {
			list = append(list, workbook.ReviewedUnit{Unit: n, Verdict: "not read"})
			continue
		}
		list = append(list, reviewedUnit(w, u))
	}
	return list
}

func reviewedUnit(w Work, u ReviewUnit) workbook.ReviewedUnit {
	out := workbook.ReviewedUnit{Unit: u.Unit, Verdict: VerdictText(u), Word: verdictWord(u), Grade: graded(u)}
	for _, o := range Odds(w.Sheet, u) {
		// A minus sign keeps to its figure where a line ends; a hyphen does not.
		out.Outside = append(out.Outside, strings.NewReplacer(" -", " −", "(-", "(−").Replace(o.Text()))
	}
	if u.Verdict == explain.Improbable { // the verdict's own column is narrow
		out.Verdict, out.Outside = VerdictWords(u.Verdict), []string{"none alone; together " + distanceText(u)}
	}
	if text := HealthyText(u); text != "" && len(u.Suspects) > 0 {
		out.Suspects = append(out.Suspects, Likelihood(u.Healthy)+" "+text)
	}
	for _, g := range SuspectGroups(u) {
		out.Suspects = append(out.Suspects, Likelihood(g.Probability)+" "+g.Text())
	}
	out.Next = FurtherTexts(u)
	if missing := u.Missing(); len(missing) > 0 {
		out.Next = append(out.Next, "not read yet: "+joined(missing))
	}
	return out
}

// joined writes a list, what is past ten counted.
func joined(list []string) string {
	const most = 10
	text := strings.Join(list[:min(len(list), most)], ", ")
	if more := len(list) - most; more > 0 {
		text += fmt.Sprintf(" and %d more", more)
	}
	return text
}

// verdictWord is the verdict as it fits above a unit's readings.
func verdictWord(u ReviewUnit) string {
	switch u.Verdict {
	case explain.Misses:
		return "not proved"
	case explain.Incomplete:
		return "begun"
	case explain.Inside:
		if u.Accused {
			return "suspect"
		}
		return "good"
	}
	return string(u.Verdict)
}

func graded(u ReviewUnit) workbook.Grade {
	switch {
	case u.Good():
		return workbook.GradeGood
	case u.Accused, u.Verdict == explain.Outside, u.Verdict == explain.Improbable:
		return workbook.GradeFaulted
	}
	return workbook.GradeOpen
}
