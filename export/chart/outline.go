package chart

import (
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/vgsvg"
)

// outlined is a canvas that draws letters as outlines. A font named in an SVG,
// or put into it, is not honoured by every program that shows one.
type outlined struct{ *vgsvg.Canvas }

// FillString draws a text at the left end of its baseline, spaced as
// font.Face.Width measures it: by advances and kerning.
func (c outlined) FillString(f font.Face, at vg.Point, s string) {
	var buffer sfnt.Buffer
	em := fixed.Int26_6(f.Face.UnitsPerEm()) // so that figures come in the font's own units
	scale := f.Font.Size / vg.Length(em)
	var path vg.Path
	var before sfnt.GlyphIndex
	for i, r := range s {
		glyph, err := f.Face.GlyphIndex(&buffer, r)
		if err != nil {
			panic("chart: " + err.Error())
		}
		if i > 0 {
			if kern, err := f.Face.Kern(&buffer, before, glyph, em, 0); err == nil {
				at.X += scale * vg.Length(kern)
			}
		}
		segments, err := f.Face.LoadGlyph(&buffer, glyph, em, nil)
		if err != nil {
			panic("chart: " + err.Error())
		}
		path = trace(path, segments, at, scale)
		advance, err := f.Face.GlyphAdvance(&buffer, glyph, em, 0)
		if err != nil {
			panic("chart: " + err.Error())
		}
		at.X += scale * vg.Length(advance)
		before = glyph
	}
	if len(path) > 0 {
		c.Fill(path)
	}
}

// trace adds a glyph's outline to a path. The font's y points down.
func trace(path vg.Path, segments sfnt.Segments, at vg.Point, scale vg.Length) vg.Path {
	point := func(p fixed.Point26_6) vg.Point {
		return vg.Point{X: at.X + scale*vg.Length(p.X), Y: at.Y - scale*vg.Length(p.Y)}
	}
	for i, s := range segments {
		switch s.Op {
		case sfnt.SegmentOpMoveTo:
			if i > 0 {
				path.Close()
			}
			path.Move(point(s.Args[0]))
		case sfnt.SegmentOpLineTo:
			path.Line(point(s.Args[0]))
		case sfnt.SegmentOpQuadTo:
			path.QuadTo(point(s.Args[0]), point(s.Args[1]))
		case sfnt.SegmentOpCubeTo:
			path.CubeTo(point(s.Args[0]), point(s.Args[1]), point(s.Args[2]))
		}
	}
	if len(segments) > 0 {
		path.Close()
	}
	return path
}
