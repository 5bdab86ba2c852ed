package table

import "io"

// WriteFigureCSV writes the data of one figure: foreign text harmless as a
// formula, cells as in the other tables.
func WriteFigureCSV(w io.Writer, header []string, rows [][]string) error {
	b := []byte(bom)
	line := func(cells []string) {
		for i, c := range cells {
			if i > 0 {
				b = append(b, ',')
			}
			if isNumber(c) {
				b = append(b, c...)
				continue
			}
			b = appendText(b, c)
		}
		b = append(b, '\n')
	}
	line(header)
	for _, r := range rows {
		line(r)
	}
	_, err := w.Write(b)
	return err
}

// isNumber keeps the sign of negative numbers, which text would be led by an
// apostrophe for.
func isNumber(s string) bool {
	for i, c := range s {
		if (c < '0' || c > '9') && c != '.' && c != 'e' && !(c == '-' && (i == 0 || s[i-1] == 'e')) && !(c == '+' && i > 0 && s[i-1] == 'e') {
			return false
		}
	}
	return s != "" && s != "-" && s != "."
}
