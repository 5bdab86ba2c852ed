package hours

// ClassSteps counts the steps of the period one zone spent in each class,
// looking at every so many, without making a record: how the classes answer to
// other inputs. Only the zone's own parts of the input are looked at.
func ClassSteps(in Input, zone, every int) (steps [NumClasses]int) {
	j := newJudge(&in, zone)
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i += every {
		steps[j.class(i)] += every
	}
	return steps
}
