package stage

// secondOrder is what every low-pass of the second order does with a signal,
// from f0, q and `passed`, its gain at 0 Hz:
//
//	|H(f)| = passed/√((1 − (f/f0)²)² + (f/(f0·q))²)
//
// With u = (f/f0)² and b = 1 − 1/(2q²), half the power of 0 Hz is left where
// u² − 2b·u − 1 = 0, so u = b + √(b² + 1) = 1/(√(b² + 1) − b), of which the
// latter loses no digits where q is small.
const secondOrder = `
breadth = 1 - 1/(2*q^2)
corner = f0/sqrt(sqrt(breadth^2 + 1) - breadth)
gain_at_carrier = passed/sqrt((1 - (in.frequency/f0)^2)^2 + (in.frequency/(f0*q))^2)
gain_at_second = passed/sqrt((1 - (in.second_frequency/f0)^2)^2 + (in.second_frequency/(f0*q))^2)
gain_at_tone = passed/sqrt((1 - (in.tone_frequency/f0)^2)^2 + (in.tone_frequency/(f0*q))^2)
` + filtered + `dc = in.dc*passed
tank_q = in.tank_q
`
