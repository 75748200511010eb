package plan

// Cautions are short and always the same; common practice, no source.
func Cautions() []string {
	return []string{
		"A soldering iron burns, and its fumes do not belong in the lungs: draw them away.",
		"Check the polarity of electrolytic capacitors, diodes, transistors and regulators twice before power.",
		"Energised rails and charged capacitors burn fingers and meters: switch off before you change a part.",
		"Turn the output down before you connect earphones or a loudspeaker: a trim out of place can be loud.",
		"Use a certified mains supply and keep it closed; mains work is for qualified people under local codes.",
		"Figures of families and instruments are typical of their class, not anyone's guarantee.",
	}
}
