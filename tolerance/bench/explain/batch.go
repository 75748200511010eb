package explain

import "context"

func (x *explainer) batch(ctx context.Context, r *Review, all [][]float64) error { return nil }
