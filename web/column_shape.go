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

// The frames that the build page uses, by how many columns it shows.
var (
	WideFrame   = Frame{Name: "wide", Width: 228, Left: 26, Block: 118, Notes: true, Height: 506, Foot: 500, Margin: 44}
	MiddleFrame = Frame{Name: "middle", Width: 178, Left: 22, Block: 92, Notes: true, Height: 506, Foot: 500, Margin: 44}
	NarrowFrame = Frame{Name: "narrow", Width: 116, Left: 20, Block: 88, Height: 506, Foot: 500, Margin: 44}
	SlimFrame   = Frame{Name: "slim", Width: 64, Left: 11, Block: 48, Height: 506, Foot: 500, Margin: 44}
)

// FrameFor returns the frame in which so many columns stand side by side on a
// wide page. Beyond twelve the picture scrolls.
func FrameFor(columns int) Frame {
	switch {
	case columns <= 3:
		return WideFrame
	case columns == 4:
		return MiddleFrame
	case columns <= 6:
		return NarrowFrame
	}
	return SlimFrame
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
	Href   string // the field it leads to
	Voice  string // "6 × white, 3.19 V each, 19.1 V together"
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
func stack(pieces []piece, s Scale, f Frame, supply Px) (blocks []Block, notes []Note, top float64) {
	for _, p := range pieces {
		if !(p.volts > 0) {
			continue
		}
		each := p.volts / float64(p.count)
		if p.count > 1 && s.Tall(each) >= textTall {
			for range p.count {
				blocks = append(blocks, block(p, each, "", top, s, f))
				top += each
			}
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
			notes = append(notes, Note{From: b.Y + b.Tall/2, Text: text + p.name + " " + volts(each)})
		}
		blocks = append(blocks, b)
		top += p.volts
	}
	spreadNotes(notes, f, supply)
	return blocks, notes, top
}

// block places one piece, or one LED of it, with its lower end at from.
func block(p piece, v float64, times string, from float64, s Scale, f Frame) Block {
	b := Block{
		Kind: p.kind, Volts: v, Y: s.Y(from + v), Tall: s.Tall(v),
		Fill: p.light.Fill, Ink: p.light.Ink, Href: p.href, Voice: p.voice,
	}
	figure := volts(v)
	if times != "" {
		figure = times + volts(v/float64(p.count))
	}
	middle := b.Y + b.Tall/2
	room := f.Block - 2*wordsPad
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

// How much room words take, estimated on the safe side from the faces used:
// the words' advance is 0.44 em on average at 14 px, the figures' exactly
// 0.6 em at 12.5 px.
const (
	wordsPad     Px = 7
	wordsGap     Px = 6
	wordAdvance  Px = 6.6
	digitAdvance Px = 7.5
)

func wordsWide(s string) Px  { return Px(len([]rune(s))) * wordAdvance }
func figureWide(s string) Px { return Px(len([]rune(s))) * digitAdvance }

// shorten cuts words to the room there is, with an ellipsis; less than three
// letters say nothing and are left out.
func shorten(s string, room Px) string {
	if wordsWide(s) <= room {
		return s
	}
	letters := int(room/wordAdvance) - 1
	if letters < 3 {
		return ""
	}
	return strings.TrimRight(string([]rune(s)[:letters]), " ,") + "…"
}

// volts writes a voltage inside the picture, whose axis says the unit.
func volts(v float64) string {
	text := strconv.FormatFloat(v, 'f', 2, 64)
	if strings.Trim(text, "-0.") == "" {
		return "0.00"
	}
	return strings.Replace(text, "-", "−", 1)
}
