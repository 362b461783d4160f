package web

import (
	"strconv"
	"strings"
)

// Frame is the room that one column of a picture has. Wide ones carry names
// and volts inside the blocks and a note beside the thin ones; narrow ones
// leave the notes out.
type Frame struct {
	Name   string // "wide", "middle", "narrow", "slim": the class that styles it
	Width  Px     // of the whole column
	Left   Px     // where the block begins; the bracket stands before it
	Block  Px     // how wide a block is
	Notes  bool   // there is room beside the block
	Height Px     // of the drawing
	Foot   Px     // where 0 V is
	Margin Px     // where the axis ends: above it is room for words
}

// The frames in which there is room beside the blocks.
var (
	WideFrame   = frame("wide", 228, 24, 114)
	MiddleFrame = frame("middle", 181, 20, 80)
)

func frame(name string, width, left, block Px) Frame {
	return Frame{Name: name, Width: width, Left: left, Block: block, Notes: width > left+block+40, Height: 506, Foot: 500, Margin: 44}
}

const (
	pageWide     Px = 724 // what all columns have on a page of 1440 pixels
	slimmest     Px = 60  // what one needs at least
	narrowest    Px = 90  // from here on captions fit in lines
	mostAbreast     = 12  // columns side by side; beyond them the picture scrolls
	columnMargin Px = 6   // to the right of a block without notes
)

// FrameFor returns the frame in which so many columns stand side by side on a
// wide page.
func FrameFor(columns int) Frame {
	switch {
	case columns <= 3:
		return WideFrame
	case columns == 4:
		return MiddleFrame
	}
	width := max(pageWide/Px(columns), slimmest)
	left := min(max(width/6, 11), 20)
	name := "narrow"
	if width < narrowest {
		name = "slim"
	}
	return frame(name, width, left, width-left-columnMargin)
}

const (
	textTall  Px = 17 // the least a block must be tall to carry a line of words
	noteTall  Px = 15 // what one line of a note beside the column takes
	lineWords Px = 16 // from one line of words in a block to the next
)

// Block is one part of a stack, from its lower end up.
type Block struct {
	Kind   string  // "sense", "driver", "left", "led", "run": the class that styles it
	Volts  float64 // [V] what it takes; its height on the scale
	Y      Px      // its upper edge
	Tall   Px
	Fill   string // "" where the class says it
	Ink    string
	Name   string // "white", cut to the room there is; "" where none is
	Figure string // "3.19", beside or below the name; "" where none is
	NameY  Px     // baseline
	FigY   Px     // baseline
	Stack  bool   // name and figure stand one above the other, centred
	Ticks  []Px   // where one LED of a merged block ends and the next begins
}

// ColumnPart is what of a string leads to one field: one block, or the LEDs of one
// stack.
type ColumnPart struct {
	Blocks []Block // from the foot up
	Href   string  // the field
	Voice  string  // "6 × white, 3.19 V each, 19.1 V together"
}

// Note is a line of words beside a block too thin to carry them.
type Note struct {
	Y    Px // baseline
	From Px // middle of the block it belongs to
	Text string
}

// Over is the part of a stack that stands higher than the supply.
type Over struct {
	Volts float64 // [V] missing
	Y     Px      // top of the stack
	Tall  Px
	Line  Px     // the supply
	Text  string // "0.30 V short"
}

// piece is a block before it has a place.
type piece struct {
	kind  string
	volts float64
	count int // identical LEDs in it, 1 for anything else
	name  string
	light Light
	href  string
	voice string
}

// stack places the pieces on the scale from the foot up. Every LED is a block
// of its own where it can carry its name; else those of one stack are merged.
func stack(pieces []piece, s Scale, f Frame, supply Px) (parts []ColumnPart, notes []Note, top float64) {
	for _, p := range pieces {
		if !(p.volts > 0) {
			continue
		}
		each := p.volts / float64(p.count)
		part := ColumnPart{Href: p.href, Voice: p.voice}
		if p.count > 1 && s.Tall(each) >= textTall {
			for range p.count {
				part.Blocks = append(part.Blocks, block(p, each, "", top, s, f))
				top += each
			}
			parts = append(parts, part)
			continue
		}
		text := ""
		if p.count > 1 {
			text = strconv.Itoa(p.count) + " × "
		}
		b := block(p, p.volts, text, top, s, f)
		for i := 1; i < p.count; i++ {
			b.Ticks = append(b.Ticks, s.Y(top+float64(i)*each))
		}
		if b.Name == "" && b.Figure == "" && f.Notes {
			notes = append(notes, Note{From: b.Y + b.Tall/2, Text: text + p.name + " " + figureVolts(each)})
		}
		part.Blocks = []Block{b}
		parts = append(parts, part)
		top += p.volts
	}
	spreadNotes(notes, f, supply)
	return parts, notes, top
}

// block places one piece, or one LED of it, with its lower end at from.
func block(p piece, v float64, times string, from float64, s Scale, f Frame) Block {
	b := Block{
		Kind: p.kind, Volts: v, Y: s.Y(from + v), Tall: s.Tall(v),
		Fill: p.light.Fill, Ink: p.light.Ink,
	}
	figure := figureVolts(v)
	if times != "" {
		figure = times + figureVolts(v/float64(p.count))
	}
	middle := b.Y + b.Tall/2
	room := f.Block - 2*f.pad()
	if p.kind == "led" && wordsWide(p.name) > room { // "cool white" is at least "white"
		p.name = p.name[strings.LastIndexByte(p.name, ' ')+1:]
	}
	switch {
	case b.Tall >= textTall && wordsWide(p.name)+figureWide(figure)+wordsGap <= room:
		b.Name, b.Figure = p.name, figure
		b.NameY, b.FigY = middle+5, middle+5
	case b.Tall >= textTall+lineWords && figureWide(figure) <= room:
		b.Stack = true
		b.Name, b.Figure = shorten(p.name, room), figure
		b.NameY, b.FigY = middle-lineWords/2+5, middle+lineWords/2+4
	case b.Tall >= textTall && figureWide(figure) <= room:
		name := shorten(p.name, room-figureWide(figure)-wordsGap)
		b.Name, b.Figure, b.Stack = name, figure, name == ""
		b.NameY, b.FigY = middle+5, middle+5
	}
	return b
}

// spreadNotes puts each note beside its block and pushes those apart that
// would lie on one another: upwards from the foot, then down again should the
// topmost have left the drawing. A note that the supply's line would strike
// through goes below it.
func spreadNotes(notes []Note, f Frame, supply Px) {
	for i := range notes {
		notes[i].Y = min(notes[i].From+4, f.Foot-4)
		if middle := notes[i].Y - 4; middle > supply-9 && middle < supply+9 {
			notes[i].Y = supply + noteTall
		}
		if i > 0 {
			notes[i].Y = min(notes[i].Y, notes[i-1].Y-noteTall)
		}
	}
	for i := len(notes) - 1; i >= 0; i-- {
		lowest := noteTall
		if i < len(notes)-1 {
			lowest = notes[i+1].Y + noteTall
		}
		notes[i].Y = max(notes[i].Y, lowest)
	}
}

// How much room words take inside a block.
const (
	wordsGap     Px = 6
	wordsSize    Px = 14  // of names
	digitAdvance Px = 7.5 // of figures, 0.6 em at 12.5 px exactly
)

// advances are the widths of the printable ASCII letters from the blank on, in
// hundredths of an em, as measured in the face and weight of the names. Others
// count as wide as a capital.
var advances = [...]Px{
	20, 24, 35, 57, 60, 89, 63, 19, 26, 26, 40, 57, 24, 46, 24, 36, 56, 45, 52, 53, 53, 51, 55, 51, 55, 56, 24, 24, 57, 57, 57, 46,
	94, 55, 55, 61, 61, 51, 49, 62, 63, 25, 25, 57, 46, 74, 63, 61, 53, 61, 58, 54, 52, 62, 57, 82, 54, 52, 52, 26, 36, 26, 49, 50,
	22, 48, 51, 50, 52, 50, 36, 49, 53, 23, 23, 48, 23, 80, 53, 51, 51, 52, 35, 44, 38, 52, 48, 69, 47, 48, 45, 27, 25, 27, 57,
}

// pad is what is left free at both sides of the words.
func (f Frame) pad() Px {
	switch {
	case f.Block >= 100:
		return 7
	case f.Notes:
		return 5
	}
	return 4
}

func wordsWide(s string) Px {
	var sum Px
	for _, r := range s {
		if i := int(r) - ' '; i >= 0 && i < len(advances) {
			sum += advances[i]
		} else {
			sum += 62
		}
	}
	return sum * wordsSize / 100
}

func figureWide(s string) Px { return Px(len([]rune(s))) * digitAdvance }

// shorten cuts words to the room there is, with an ellipsis; less than three
// letters say nothing and are left out.
func shorten(s string, room Px) string {
	if wordsWide(s) <= room {
		return s
	}
	letters := []rune(s)
	for n := len(letters) - 1; n >= 3; n-- {
		if cut := strings.TrimRight(string(letters[:n]), " ,") + "…"; wordsWide(cut) <= room {
			return cut
		}
	}
	return ""
}

// figureVolts writes a voltage inside the picture, whose axis says the unit.
func figureVolts(v float64) string {
	text := strconv.FormatFloat(v, 'f', 2, 64)
	if strings.Trim(text, "-0.") == "" {
		return "0.00"
	}
	return strings.Replace(text, "-", "−", 1)
}
