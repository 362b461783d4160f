package main

import (
	"testing"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/chromedp"
	"github.com/chromedp/chromedp/kb"
)

// Without scripts the same work is done by plain forms.
func TestABuildIsMadeAndMendedWithoutScripts(t *testing.T) {
	b := openTab(t, serveFresh(t), "/")
	if _, err := chromedp.Call(b.ctx, emulation.SetScriptExecutionDisabled, emulation.SetScriptExecutionDisabledParams{Value: true}); err != nil {
		t.Fatal(err)
	}
	b.do("reload", reload())
	if eval[bool](b, `typeof htmx === "object"`) {
		t.Fatal("scripts still run")
	}

	b.reach("button", "New build")
	b.press(kb.Enter)
	b.wait("the new build", `document.getElementById("build")`)
	b.reach("textbox", "how many of LED 1")
	b.fill("4")
	b.press(kb.Enter)
	b.wait("the picture to say short", `/[0-9]\sV\sshort/.test(document.getElementById("picture").textContent)`)
	b.reach("button", "one LED fewer")
	b.press(kb.Enter)
	b.wait("the remedy to cure it", `!/short/.test(document.getElementById("picture").textContent)`)
	if got := eval[string](b, quantityOfLED1); got != "3" {
		t.Errorf("%s LEDs are left, want 3", got)
	}

	b.reach("button", "cold, low supply")
	b.press(kb.Enter)
	b.wait("the cold picture", `document.querySelector("[name=corner][value=cold]").getAttribute("aria-pressed") === "true"`)
	b.wait("the whole page", `document.readyState === "complete"`)
	b.picture("cold, without scripts")

	b.allow("422") // the answer to a form with a wrong field
	b.reach("textbox", "voltage")
	b.fill("a dozen")
	b.press(kb.Enter)
	b.wait("the reason beside the field", `document.querySelector("[aria-invalid=true]")?.value === "a dozen"`)
	b.reach("textbox", "voltage")
	b.fill("12")
	b.press(kb.Enter)
	b.wait("the field to be right", `!document.querySelector("[aria-invalid=true]")`)

	b.reach("button", "Undo")
	b.press(kb.Enter)
	b.wait("the voltage of before", `[...document.querySelectorAll("#build input")].find(e => e.computedName === "voltage").value.includes("12.6")`)
}

const quantityOfLED1 = `[...document.querySelectorAll("#build input")].find(e => e.computedName === "how many of LED 1").value`
