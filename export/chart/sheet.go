package chart

import (
	"bytes"
	"encoding/xml"
	"errors"
	"image/color"
	"io"
	"sort"
	"strings"
	"unicode"

	stdfont "golang.org/x/image/font"
	"gonum.org/v1/plot"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgsvg"
)

// The inks. A drawing says all it says in black and white.
var (
	black = color.Gray{Y: 0x22}
	grey  = color.Gray{Y: 0x50}
	pale  = color.Gray{Y: 0xdd}
	white = color.Gray{Y: 0xff}
)

// letters is the style of a text in the one face that all texts have.
func letters(size float64, bold bool) text.Style {
	f := font.Font{Typeface: "Liberation", Variant: "Sans", Size: vg.Points(size)}
	if bold {
		f.Weight = stdfont.WeightBold
	}
	return text.Style{Color: black, Font: f, Handler: text.Plain{Fonts: font.DefaultCache}}
}

// newPlot is a plot whose axes are lettered and drawn as everywhere.
func newPlot() *plot.Plot {
	p := plot.New()
	p.TextHandler, p.BackgroundColor = text.Plain{Fonts: font.DefaultCache}, nil
	for _, a := range []*plot.Axis{&p.X, &p.Y} {
		style, ticks := a.Label.TextStyle, a.Tick.Label
		style.Font, ticks.Font = letters(10, false).Font, letters(9, false).Font
		style.Color, ticks.Color = black, black
		style.Handler, ticks.Handler = p.TextHandler, p.TextHandler
		a.Label.TextStyle, a.Tick.Label = style, ticks
		a.Label.Padding, a.Padding = vg.Points(4), 0
	}
	return p
}

// sheet is a plot with a title above and sentences below.
type sheet struct {
	title, description string
	plot               *plot.Plot
	notes              []string
}

// The size of every drawing: as wide as the text of an A4 or Letter page.
const (
	wide   = 520 // points
	high   = 380
	margin = 12
)

// write draws the sheet as SVG, whole or not at all.
func (s *sheet) write(w io.Writer) error {
	canvas := outlined{vgsvg.New(wide, high)}
	c := draw.NewCanvas(canvas, wide, high)
	c.SetColor(white)
	c.Fill(c.Rectangle.Path())
	c = draw.Crop(c, margin, -margin, margin, -margin)

	title := letters(13, true)
	title.YAlign = draw.YTop
	c.FillText(title, vg.Point{X: c.Min.X, Y: c.Max.Y}, cut(s.title, title, c.Max.X-c.Min.X))
	c = draw.Crop(c, 0, 0, 0, -title.Height(s.title)-margin)

	notes := letters(8, false)
	below := s.lines(notes, c.Max.X-c.Min.X)
	for i := range below {
		c.FillText(notes, vg.Point{X: c.Min.X, Y: c.Min.Y + vg.Length(len(below)-1-i)*vg.Points(10.5)}, below[i])
	}
	s.plot.Draw(draw.Crop(c, 0, 0, vg.Length(len(below))*vg.Points(10.5)+6, 0))
	return s.finish(w, canvas)
}

// finish writes what was drawn, with its words.
func (s *sheet) finish(w io.Writer, canvas outlined) error {
	var drawn, words bytes.Buffer
	if _, err := canvas.WriteTo(&drawn); err != nil {
		return err
	}
	const namespace = `xmlns:xlink="http://www.w3.org/1999/xlink">` + "\n" // ends the first tag
	head, rest, found := bytes.Cut(drawn.Bytes(), []byte(namespace))
	if !found {
		return errors.New("chart: the drawing begins otherwise than it used to")
	}
	for _, part := range [][2]string{{"title", s.title}, {"desc", s.description}} {
		words.WriteString("<" + part[0] + ">")
		if err := xml.EscapeText(&words, []byte(part[1])); err != nil {
			return err
		}
		words.WriteString("</" + part[0] + ">\n")
	}
	_, err := w.Write(bytes.Join([][]byte{head, []byte(namespace), words.Bytes(), rest}, nil))
	return err
}

// lines breaks the notes at words to a width.
func (s *sheet) lines(style text.Style, width vg.Length) []string {
	var list []string
	for _, note := range s.notes {
		line := ""
		for _, word := range strings.Fields(plain(note)) {
			longer := strings.TrimSpace(line + " " + word)
			if line != "" && style.Width(longer) > width {
				list, line = append(list, line), word
				continue
			}
			line = longer
		}
		if line != "" {
			list = append(list, line)
		}
	}
	return list
}

// cut shortens a text to a width, the last letter an ellipsis.
func cut(s string, style text.Style, width vg.Length) string {
	if style.Width(s) <= width {
		return s
	}
	letters := []rune(s)
	n := sort.Search(len(letters), func(n int) bool { return style.Width(string(letters[:n])+"…") > width })
	return string(letters[:max(0, n-1)]) + "…"
}

// longest is how many letters of one text are drawn.
const longest = 600

// plain makes a text from a build file fit to be drawn: one line, no control
// characters, no longer than anyone reads.
func plain(s string) string {
	if letters := []rune(s); len(letters) > longest {
		s = string(letters[:longest-1]) + "…"
	}
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) || unicode.Is(unicode.Bidi_Control, r) {
			return ' '
		}
		return r
	}, strings.ToValidUTF8(s, "\ufffd"))
}
