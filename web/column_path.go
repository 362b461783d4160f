package web

// middle is the middle of the blocks.
func (f Frame) middle() Px { return f.Left + f.Block/2 }

// joint is the mark between two LEDs of a merged block: short, at both edges.
func (f Frame) joint(y Px) string {
	arm := min(9, f.Block/5)
	right := f.Left + f.Block
	return "M" + f.Left.String() + " " + y.String() + "h" + arm.String() +
		"M" + right.String() + " " + y.String() + "h-" + arm.String()
}

// across is a line over the blocks, a little wider than they are.
func (f Frame) across(y Px) string {
	return "M" + (f.Left - 5).String() + " " + y.String() + "H" + (f.Left + f.Block + 5).String()
}

// flagWide is how wide a flag with these words is.
func (f Frame) flagWide(words string) Px { return min(figureWide(words)+14, f.Width) }

// flagX is where a flag with these words begins: over the middle of the blocks
// but not beyond the drawing.
func (f Frame) flagX(words string) Px {
	return max(0, f.middle()-f.flagWide(words)/2)
}

// worstPath is the bracket to the left of the blocks.
func (v ColumnView) worstPath() string {
	x := v.Frame.Left - 4
	arm := min(5, x-1)
	return "M" + x.String() + " " + v.Worst.Upper.String() + "h-" + arm.String() +
		"V" + v.Worst.Lower.String() + "h" + arm.String()
}

// leader joins a note to its block.
func (v ColumnView) leader(n Note) string {
	x := v.Frame.Left + v.Frame.Block
	return "M" + x.String() + " " + n.From.String() + "L" + (x + 10).String() + " " + (n.Y - 4).String()
}
