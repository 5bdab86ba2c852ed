package comfort

import "math"

// Constants of Gagge's two-node model, ASHRAE 55-2023 Appendix D.
const (
	nodeWattsPerMet   = 58.2   // W/m² per met in this model
	bodyMassKg        = 69.9   // kg
	bodyAreaM2        = 1.8258 // m²
	neutralSkinC      = 33.7
	neutralCoreC      = 36.8
	neutralBodyC      = 36.49
	neutralBloodFlow  = 6.3 // L/(h·m²)
	sweatGain         = 170.0
	strictionGain     = 0.5
	stefanBoltzmann   = 5.6697e-8
	standardClothFact = 0.25 // rise of the clothing area per clo, standard environment
)

// twoNode is a body of skin and core in given conditions. Heat flows in W/m²
// of skin, vapour pressures in torr.
type twoNode struct {
	o         SETOptions
	met, work float64 // met
	rest      float64 // metabolic heat without shivering
	airC, trC float64
	vapour    float64
	pressure  float64 // atm

	clothing   float64 // insulation, m²K/W
	areaFactor float64 // clothing area factor
	iCl        float64 // clothing vapour efficiency
	wCrit      float64 // greatest skin wettedness
	lewis      float64 // K/torr
	hc         float64 // convection, W/(m²K)
	dilation   float64 // gain of blood flow
	emission   float64 // emissivity times the share of the body that radiates

	skinC, coreC, skinShare float64
	bloodFlow               float64
	metabolism              float64
	hr                      float64
	clothC                  float64
	evaporation, wet        float64
	sensible                float64
}

func newTwoNode(c Conditions, o SETOptions) *twoNode {
	n := &twoNode{
		o: o, met: c.Met, work: c.WorkMet, rest: c.Met * nodeWattsPerMet,
		airC: c.AirC, trC: c.RadiantC,
		vapour:   math.Max(0, math.Min(100, c.RHPct)) / 100 * satTorr(c.AirC),
		pressure: 1,
		clothing: m2KPerClo * c.Clo, areaFactor: 1 + 0.15*c.Clo,
		skinC: neutralSkinC, coreC: neutralCoreC, skinShare: 0.1,
		bloodFlow: neutralBloodFlow, evaporation: 0.1 * c.Met, hr: 4.7,
	}
	if o.PressurePa != 0 {
		n.pressure = o.PressurePa / 101325
	}
	n.metabolism = n.rest
	v := math.Max(c.AirSpeedMS, 0.1)
	if c.Clo > 0 {
		n.wCrit, n.iCl = 0.59*math.Pow(v, -0.08), 0.45
	} else {
		n.wCrit, n.iCl = 0.38*math.Pow(v, -0.29), 1
	}
	n.lewis = 2.2 / n.pressure
	n.hc = math.Max(3*math.Pow(n.pressure, 0.53), 8.600001*math.Pow(v*n.pressure, 0.53))
	n.dilation, n.emission = 120, 0.72
	if o.Form == SETFormB {
		n.dilation = 200
		n.emission = 0.95 * 0.73
		if o.Posture == Sitting {
			n.emission = 0.95 * 0.70
		}
		n.hc = math.Max(n.hc, n.activityConvection())
	}
	hrAir := n.hr + n.hc
	ra := 1 / (n.areaFactor * hrAir)
	top := (n.hr*n.trC + n.hc*n.airC) / hrAir
	n.clothC = (ra*n.skinC + n.clothing*top) / (ra + n.clothing)
	return n
}

// activityConvection is the least convection that the body's own movement
// gives, 0 where the form leaves it out.
func (n *twoNode) activityConvection() float64 {
	if n.met <= 0.85 || (n.o.Form == SETFormB && n.o.ForCoolingEffect) {
		return 0
	}
	return 5.66 * math.Pow(n.met-0.85, 0.39)
}

// minute moves the body on by one minute.
func (n *twoNode) minute() {
	// Dry heat through the clothing, whose temperature sets its own radiation.
	var ra, top float64
	for range 150 {
		mean := (n.clothC+n.trC)/2 + 273.15
		n.hr = 4 * stefanBoltzmann * mean * mean * mean * n.emission
		ht := n.hr + n.hc
		ra = 1 / (n.areaFactor * ht)
		top = (n.hr*n.trC + n.hc*n.airC) / ht
		cloth := (ra*n.skinC + n.clothing*top) / (ra + n.clothing)
		moved := math.Abs(cloth - n.clothC)
		n.clothC = cloth
		if moved <= 0.001 {
			break
		}
	}
	n.sensible = (n.skinC - top) / (ra + n.clothing)

	fromCore := (n.coreC - n.skinC) * (5.28 + 1.163*n.bloodFlow)
	breathing := 0.0023*n.metabolism*(44-n.vapour) + 0.0014*n.metabolism*(34-n.airC)
	coreGain := n.metabolism - fromCore - breathing - n.work*nodeWattsPerMet
	skinGain := fromCore - n.sensible - n.evaporation
	perMinute := bodyAreaM2 / (0.97 * bodyMassKg * 60)
	n.skinC += skinGain * perMinute / n.skinShare
	n.coreC += coreGain * perMinute / (1 - n.skinShare)
	body := n.skinShare*n.skinC + (1-n.skinShare)*n.coreC

	warmSkin, coldSkin := split(n.skinC - neutralSkinC)
	warmCore, coldCore := split(n.coreC - neutralCoreC)
	warmBody, _ := split(body - neutralBodyC)
	flow := (neutralBloodFlow + n.dilation*warmCore) / (1 + strictionGain*coldSkin)
	n.bloodFlow = math.Max(0.5, math.Min(90, flow))
	n.sweat(math.Min(500, sweatGain*warmBody*math.Exp(warmSkin/10.7)))
	n.metabolism = n.rest + 19.4*coldSkin*coldCore
	n.skinShare = 0.0417737 + 0.7451833/(n.bloodFlow+0.585417)
}

// sweat evaporates sweat, g/(h·m²), as far as clothing and air let it.
func (n *twoNode) sweat(rate float64) {
	resistance := 1/(n.lewis*n.areaFactor*n.hc) + n.clothing/(n.lewis*n.iCl)
	most := (satTorr(n.skinC) - n.vapour) / resistance
	bySweat := 0.68 * rate
	share := bySweat / most
	n.wet = 0.06 + 0.94*share
	diffusion := n.wet*most - bySweat
	if n.wet > n.wCrit {
		n.wet = n.wCrit
		share = n.wCrit / 0.94
		bySweat = share * most
		diffusion = 0.06 * (1 - share) * most
	}
	if most < 0 {
		diffusion, bySweat, n.wet = 0, 0, n.wCrit
	}
	n.evaporation = bySweat + diffusion
}

// standardTempC is the temperature of the standard environment in which skin
// of this temperature and wettedness loses as much heat. The loss falls
// steadily with temperature, so Newton's steps converge from below.
func (n *twoNode) standardTempC() float64 {
	hc := math.Max(3, 3*math.Pow(n.pressure, 0.53))
	hc = math.Max(hc, n.activityConvection())
	ht := hc + n.hr
	clo := 1.52/(n.met-n.work+0.6944) - 0.1835
	clothing := m2KPerClo * clo
	area := 1 + standardClothFact*clo
	fcl := 1 / (1 + m2KPerClo*area*ht*clo)
	const im = 0.45
	iCl := im * hc / ht * (1 - fcl) / (hc/ht - fcl*im)
	dry := 1 / (1/(area*ht) + clothing)
	evaporative := 1 / (1/(n.lewis*area*hc) + clothing/(n.lewis*iCl))

	loss := n.sensible + n.evaporation
	atSkin := satTorr(n.skinC)
	t := n.skinC - loss/dry
	for range 100 {
		sat := satTorr(t)
		excess := loss - dry*(n.skinC-t) - n.wet*evaporative*(atSkin-0.5*sat)
		slope := dry + 0.5*n.wet*evaporative*sat*4030.183/((t+235)*(t+235))
		step := excess / slope
		t -= step
		if math.Abs(step) < 1e-9 {
			break
		}
	}
	return t
}

// split returns a difference as its warm and its cold side, both positive.
func split(x float64) (warm, cold float64) {
	return math.Max(0, x), math.Max(0, -x)
}
