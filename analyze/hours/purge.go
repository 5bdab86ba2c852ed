package hours

import (
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// purgeUse is whether a night hour offered night purge, and whether it was used.
type purgeUse uint8

const (
	purgeNone purgeUse = iota
	purgeOffered
	purgeUsed
	purgeUnknown // it cannot be said whether it was available, or whether it was used
)

// purge judges night purge in one zone: outside occupied time, within the
// purge hours, warm indoors, outdoors cooler by a margin and not too cold. It
// is used when a window is open or plant moves unconditioned air.
type purge struct {
	in  *Input
	z   int
	cal *calendar.Calendar
}

func newPurge(in *Input, z int) *purge { return &purge{in: in, z: z, cal: in.Calendar} }

func (p *purge) at(i int) purgeUse {
	c := &p.in.Criteria
	hour := float64(p.cal.MinuteOfDay[i]) / 60
	night := hour >= c.PurgeFromH || hour < c.PurgeToH
	if c.PurgeFromH < c.PurgeToH {
		night = hour >= c.PurgeFromH && hour < c.PurgeToH
	}
	run, room := &p.in.Running.Zones[p.z], &p.in.Indoor[p.z]
	if !night || run.Occupied[i] != running.Vacant || room.OperativeC == nil || p.in.Outdoor.TempC == nil {
		return purgeNone
	}
	indoorC, outdoorC := float64(room.OperativeC[i]), float64(p.in.Outdoor.TempC[i])
	switch {
	case outdoorC < c.PurgeOutdoorMinC || indoorC < c.PurgeIndoorMinC || outdoorC > indoorC-c.PurgeDifferenceK:
		return purgeNone // one known reason is enough
	case math.IsNaN(indoorC) || math.IsNaN(outdoorC):
		return purgeUnknown
	}
	switch {
	case run.State[i] == running.Open, run.State[i] == running.Both && run.Plant[i] == uint8(site.PlantVent),
		run.State[i] == running.Mech && run.Plant[i] == uint8(site.PlantVent):
		return purgeUsed
	case run.State[i] == running.Unknown:
		return purgeUnknown
	}
	return purgeOffered
}
