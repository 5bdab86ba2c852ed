package demo

import (
	"bufio"
	"fmt"

	"github.com/xuri/excelize/v2"
)

// writePower writes the units' electric power, hourly means stamped with the
// start of their hour in standard time, as a workbook.
func (b *building) writePower(dir string) error {
	book := excelize.NewFile()
	defer book.Close()
	const sheet = "Power"
	if err := book.SetSheetName("Sheet1", sheet); err != nil {
		return fmt.Errorf("demo: write the workbook: %w", err)
	}
	style, err := book.NewStyle(&excelize.Style{NumFmt: 22})
	if err != nil {
		return fmt.Errorf("demo: write the workbook: %w", err)
	}
	sw, err := book.NewStreamWriter(sheet)
	if err != nil {
		return fmt.Errorf("demo: write the workbook: %w", err)
	}
	head := []any{"Hour"}
	for _, u := range b.units {
		head = append(head, u.spec.id+" kW")
	}
	if err := sw.SetRow("A1", head); err != nil {
		return fmt.Errorf("demo: write the workbook: %w", err)
	}
	row := 2
	cells := make([]any, len(head))
	for i := 0; i+12 <= b.truth.N; i += 12 {
		local := b.truth.StartUTC + int64(i)*stepS + 3600
		// Days since 1899-12-30, the date system of workbooks.
		cells[0] = excelize.Cell{StyleID: style, Value: float64(local)/86400 + 25569}
		for k := range b.units {
			sum := 0.0
			for _, p := range b.truth.Plants[k].PowerKW[i : i+12] {
				sum += float64(p)
			}
			cells[k+1] = float64(int64(sum/12*100+0.5)) / 100
		}
		at, _ := excelize.CoordinatesToCellName(1, row)
		if err := sw.SetRow(at, cells); err != nil {
			return fmt.Errorf("demo: write the workbook: %w", err)
		}
		row++
	}
	if err := sw.Flush(); err != nil {
		return fmt.Errorf("demo: write the workbook: %w", err)
	}
	return writeFile(dir, "logs/power.xlsx", func(w *bufio.Writer) error {
		_, err := book.WriteTo(w)
		return err
	})
}
