package static

import "embed"

// The documents' JSON Schemas are no page's business: they have an address of
// their own, without a hash, which other programs may note down.
//
//go:embed schema/*.json
var schemas embed.FS

// Schema returns a schema by its file name, such as "build-1.json", and
// whether there is such a one.
func Schema(name string) ([]byte, bool) {
	content, err := schemas.ReadFile("schema/" + name)
	return content, err == nil
}
