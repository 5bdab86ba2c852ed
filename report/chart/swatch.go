package chart

// Swatch is the key of a class for legends written in HTML, 11 by 7 points. It
// carries no text of its own and is hidden from reading aloud: the class's
// words must stand beside it. An unknown class gives an empty swatch.
func Swatch(c Class) SVG {
	cv := newCanvas(swatchW+1, swatchH+1)
	drawBars(cv, []bar{{class: c, Rectangle: rect(0.5, 0.5, swatchW+0.5, swatchH+0.5)}})
	return SVG(`<svg xmlns="http://www.w3.org/2000/svg" width="` + short(float64(cv.w)) + `pt" height="` + short(float64(cv.h)) +
		`pt" viewBox="0 0 ` + short(float64(cv.w)) + " " + short(float64(cv.h)) + `" aria-hidden="true" fill="none">` + "\n" +
		cv.content() + "</svg>")
}
