package document

import (
	"strings"
	"unicode/utf8"

	"github.com/agnivade/levenshtein"
)

// longestWord is more than any word a file can name.
const longestWord = 64

// Nearest is the known word most like the one found: of the same letters in
// another case, or at an edit distance of at most a third of its length, rounded
// (two letters swapped are two edits: five letters allow them). It is "" where nothing is close. Of
// words equally close the first wins.
func Nearest(word string, known []string) string {
	length := utf8.RuneCountInString(word)
	if length == 0 || length > longestWord {
		return ""
	}
	folded := strings.ToLower(word)
	limit := (length + 1) / 3
	nearest := ""
	for _, k := range known {
		if k == word {
			return k
		}
		if d := levenshtein.ComputeDistance(folded, strings.ToLower(k)); d <= limit {
			nearest, limit = k, d-1
		}
	}
	return nearest
}
