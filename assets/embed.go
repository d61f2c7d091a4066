// Package assets holds the files that are built into the program: the icon and
// the one font family that screen and paper share.
//
// The family is DejaVu Sans Condensed. It has the signs engineering text needs
// (Δ η ≤ √ ³ ⁻ ⌀ and so on), so no glyph ever comes from whatever fonts the
// machine happens to have, and a text is as wide on paper as on the screen. Its
// licence is beside it in fonts/LICENSE-DejaVu.txt.
//
// The slices are shared by the whole program and must not be written to. A
// library that changes a font while it takes the used glyphs out of it (as PDF
// writers do) must get its own copy: bytes.Clone(assets.FontRegular).
package assets

import _ "embed"

// The faces of the font family as TrueType files. Read only: clone before
// handing them to anything that subsets.
var (
	//go:embed fonts/DejaVuSansCondensed.ttf
	FontRegular []byte
	//go:embed fonts/DejaVuSansCondensed-Bold.ttf
	FontBold []byte
	//go:embed fonts/DejaVuSansCondensed-Oblique.ttf
	FontOblique []byte
)

// Icon is the program's icon as PNG, 256 × 256 pixels with transparent corners,
// drawn from icon.svg. Read only.
//
//go:embed icon.png
var Icon []byte

// IconSVG is the source drawing of the icon. Read only.
//
//go:embed icon.svg
var IconSVG []byte
