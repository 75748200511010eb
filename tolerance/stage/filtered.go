package stage

// filtered is what a linear stage hands on of each part of a signal, once its
// gains at the carrier, at the other carrier and at the note are known.
const filtered = `frequency = in.frequency
level = in.level*gain_at_carrier
second_frequency = in.second_frequency
second_level = in.second_level*gain_at_second
tone_frequency = in.tone_frequency
tone_level = in.tone_level*gain_at_tone
`
