package frame

import (
	"bytes"
	_ "embed" // the schemas
)

//go:embed schema/frame.schema.json
var frameSchema []byte

//go:embed schema/sidecar.schema.json
var sidecarSchema []byte

// Schema is the JSON Schema (2020-12) of a frame, urn:leadline:frame:1.
// Every document that Marshal writes it accepts, and nearly every one that
// Parse takes: bounds are held there against a number's double, here against
// its digits. The few rules it cannot say are named in its description.
func Schema() []byte { return bytes.Clone(frameSchema) }

// SidecarSchema is the JSON Schema (2020-12) of a sidecar, with the frame's
// embedded among its $defs, so that it stands alone (JSON Schema core §9.3,
// compound documents). Its references are made absolute: some validators lose
// the base of a urn on the way into an embedded schema.
func SidecarSchema() []byte {
	const defs = "\n  \"$defs\": {"
	frame := bytes.ReplaceAll(bytes.TrimSpace(frameSchema), []byte(`"#/$defs/`), []byte(`"urn:leadline:frame:1#/$defs/`))
	bundled := append([]byte(defs+"\n    \"frame\": "), frame...)
	return bytes.Replace(sidecarSchema, []byte(defs), append(bundled, ','), 1)
}
