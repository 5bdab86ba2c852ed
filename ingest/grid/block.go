package grid

// Steps are stored in blocks that are allocated when a reading falls into
// them, so that the period need not be known before the logs were read. A
// block covers a fortnight at 5 minutes.
const (
	blockShift = 12
	blockSteps = 1 << blockShift
	blockMask  = blockSteps - 1
)

type block struct {
	mean    [blockSteps]float32
	covered [blockSteps]uint16
	// readings accepted in the step; at most one per second, so that the 900
	// seconds of the longest step fit.
	readings [blockSteps]uint16
	total    int64
}

// blocks is a sparse column over all of time; step numbers count from 1970.
type blocks struct {
	byNumber map[int64]*block
	lastNo   int64
	last     *block
}

func (b *blocks) at(step int64) *block {
	no := step >> blockShift
	if b.last != nil && b.lastNo == no {
		return b.last
	}
	blk := b.byNumber[no]
	if blk == nil {
		blk = new(block)
		if b.byNumber == nil {
			b.byNumber = make(map[int64]*block)
		}
		b.byNumber[no] = blk
	}
	b.last, b.lastNo = blk, no
	return blk
}

// put stores one finished step.
func (b *blocks) put(step int64, mean float32, covered, readings uint16) {
	blk := b.at(step)
	i := step & blockMask
	blk.mean[i], blk.covered[i], blk.readings[i] = mean, covered, readings
	blk.total += int64(readings)
}

// column joins the blocks to n steps from the step first and frees them. The
// readings outside are returned as their number.
func (b *blocks) column(first int64, n int) (c Column, readings []uint16, outside int64) {
	nan := nan32()
	c.Mean, c.CoveredS, readings = make([]float32, n), make([]uint16, n), make([]uint16, n)
	for i := range c.Mean {
		c.Mean[i] = nan
	}
	var inside, all int64
	for no, blk := range b.byNumber {
		all += blk.total
		for i := range blk.mean {
			at := no<<blockShift + int64(i) - first
			if at < 0 || at >= int64(n) || (blk.covered[i] == 0 && blk.readings[i] == 0) {
				continue
			}
			c.CoveredS[at], readings[at] = blk.covered[i], blk.readings[i]
			inside += int64(blk.readings[i])
			if blk.covered[i] > 0 {
				c.Mean[at] = blk.mean[i]
			}
		}
	}
	*b = blocks{}
	return c, readings, all - inside
}

func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}
