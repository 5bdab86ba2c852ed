package chart

import (
	"image/color"
	"math"
)

// luminance is the relative luminance of a colour, 0 (black) to 1 (white):
// W3C, Web Content Accessibility Guidelines 2.2, "relative luminance", on the
// sRGB transfer curve of IEC 61966-2-1.
func luminance(c color.RGBA) float64 {
	r, g, b := linear(c.R), linear(c.G), linear(c.B)
	return 0.2126*r + 0.7152*g + 0.0722*b
}

func linear(v uint8) float64 {
	s := float64(v) / 255
	if s <= 0.04045 {
		return s / 12.92
	}
	return math.Pow((s+0.055)/1.055, 2.4)
}
