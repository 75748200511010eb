package plan

// Cautions are short and always the same; common practice, no source.
func Cautions() []string {
	return []string{
		"A soldering iron burns, and its fumes do not belong in the lungs: draw them away, and wash your hands of solder.",
		"Polarity: check every electrolytic capacitor, diode, transistor and regulator twice before power. The wrong way round they heat, and some burst.",
		"Switch off before you solder or change a part. Energised rails and charged capacitors burn fingers and meters; slip a probe once and a part is gone.",
		"Hearing: turn the output down before you connect earphones or a loudspeaker. A trim out of place can be loud.",
		"Power it from a certified mains supply and keep that closed. Anything on the mains is for qualified people, under the local electrical code.",
		"Figures of part families and instruments are typical of their class, not anyone's guarantee: check what the maker says of the parts you buy.",
	}
}
