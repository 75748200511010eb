package offer

import (
	"fmt"
	"strconv"
	"strings"
)

// Money is an amount in ten-thousandths of the price book's currency. Sums of
// it are exact.
type Money int64

// Cent and One are the amounts that printing rounds to and that a price counts in.
const (
	cent Money = 100
	one  Money = 10_000
)

// largestPrice is the highest price of one piece that a book may ask. With it
// and mostPieces no line overflows.
const largestPrice = 100_000 * one

// mostPieces is the largest quantity that can be bought on one line.
const mostPieces = 100_000_000

// String is the amount with two decimals, halves rounded away from zero, as
// totals are printed: "12.34".
func (m Money) String() string {
	half := cent / 2
	if m < 0 {
		return "-" + (-m).String()
	}
	whole := (m + half) / cent
	return fmt.Sprintf("%d.%02d", whole/100, whole%100)
}

// Each is the amount with two to four decimals and nothing rounded, as prices
// of one piece are printed: "0.034", "1.20".
func (m Money) Each() string {
	if m < 0 {
		return "-" + (-m).Each()
	}
	text := fmt.Sprintf("%d.%04d", m/one, m%one)
	for range 2 {
		text = strings.TrimSuffix(text, "0")
	}
	return text
}

// Float is the amount in the currency, for a cell of a workbook.
func (m Money) Float() float64 { return float64(m) / float64(one) }

// MarshalJSON writes the amount as a decimal number, exactly.
func (m Money) MarshalJSON() ([]byte, error) {
	text := fmt.Sprintf("%d.%04d", m/one, m%one)
	if m < 0 {
		text = fmt.Sprintf("-%d.%04d", -m/one, -m%one)
	}
	return []byte(strings.TrimSuffix(strings.TrimRight(text, "0"), ".")), nil
}

// UnmarshalJSON reads what MarshalJSON writes.
func (m *Money) UnmarshalJSON(b []byte) error {
	text, negative := strings.CutPrefix(string(b), "-")
	v, err := ParseMoney(text)
	if err != nil {
		return err
	}
	if negative {
		v = -v
	}
	*m = v
	return nil
}

// ParseMoney reads an amount such as 0.034: digits, a dot, at most four more.
func ParseMoney(text string) (Money, error) {
	whole, part, dotted := strings.Cut(text, ".")
	if dotted && part == "" || len(part) > 4 || !digits(whole) || part != "" && !digits(part) {
		return 0, fmt.Errorf("%q is no amount: expected one such as 0.034, with at most four decimals", text)
	}
	n, err := strconv.ParseInt(whole+(part + "0000")[:4], 10, 64)
	if err != nil {
		return 0, fmt.Errorf("%q is too large an amount", text)
	}
	return Money(n), nil
}

// digits reports whether s is one or more decimal digits.
func digits(s string) bool {
	for _, c := range s {
		if c < '0' || c > '9' {
			return false
		}
	}
	return s != ""
}
