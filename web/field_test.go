package web_test

import (
	"context"
	"strings"
	"testing"

	"lanternbook/web"
)

type fieldCase struct {
	name  string
	field web.FieldView
	has   []string
	not   []string
}

func TestField(t *testing.T) {
	cases := []fieldCase{
		{
			name:  "an input is tied to its label, error and hint",
			field: web.FieldView{Name: "strings.0.driver.sense.ohms", Label: "sense resistor", Value: "110 Ω", Mode: "decimal"},
			has: []string{
				`<label for="f-strings-0-driver-sense-ohms">sense resistor</label>`,
				`name="strings.0.driver.sense.ohms"`, `value="110 Ω"`, `inputmode="decimal"`, `type="text"`,
				`aria-describedby="f-strings-0-driver-sense-ohms-error f-strings-0-driver-sense-ohms-hint"`, `aria-invalid="false"`,
			},
			not: []string{"<select", "<textarea", "<button"},
		},
		{
			name:  "an error stands beside what was typed",
			field: web.FieldView{Name: "x", Value: `4k7"<b>`, Error: "must be above 0 Ω"},
			has:   []string{`aria-invalid="true"`, `value="4k7&#34;&lt;b&gt;"`, `<p class="error" id="f-x-error">must be above 0 Ω</p>`},
		},
		{
			name:  "a list marks the chosen entry",
			field: web.FieldView{Name: "part", Value: "b", Groups: []web.OptionGroup{{Options: []web.Option{{"a", "first"}}}, {Label: "drawer", Options: []web.Option{{"b", "second"}}}}},
			has:   []string{`<optgroup label="drawer">`, `<option value="b" selected>second</option>`, `<option value="a">first</option>`},
			not:   []string{"<input"},
		},
		{
			name:  "several lines",
			field: web.FieldView{Name: "notes", Value: "one\ntwo", Lines: 4},
			has:   []string{`rows="4"`, ">one\ntwo</textarea>"},
			not:   []string{"<input"},
		},
		{
			name:  "an offer sets the field, with scripts or without",
			field: web.FieldView{Name: "ohms", Offers: []web.Offer{{Value: "18 Ω", Gives: "34.1 mA"}}},
			has:   []string{`name="set" value="ohms=18 Ω"`, `data-sets="f-ohms"`, `data-value="18 Ω"`, "34.1 mA"},
		},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			var b strings.Builder
			if err := web.Field(c.field).Render(context.Background(), &b); err != nil {
				t.Fatal(err)
			}
			for _, want := range c.has {
				if !strings.Contains(b.String(), want) {
					t.Errorf("no %s in %s", want, b.String())
				}
			}
			for _, unwanted := range c.not {
				if strings.Contains(b.String(), unwanted) {
					t.Errorf("%s in %s", unwanted, b.String())
				}
			}
		})
	}
}
