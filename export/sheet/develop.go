package sheet

import (
	"fmt"

	"lobewright/tolerance/chain"
)

// develop prepares the moving figure of a barrel: one turn of its development around the follower, which stands
// still in the middle. The development has copies on either side, so that the window is always full.
func (t *Turn) develop() (*turnView, error) {
	d := t.Developed
	period, room := d.period(), 0.06*d.Length
	v := &turnView{Turn: *t, CenterY: 0 - t.Offset, Line: 0, Stroke: period / 500, Dash: period / 100}
	v.View = fmt.Sprintf("%.5g %.5g %.5g %.5g", -period/2, -d.Length-room, period, d.Length+2*room)
	for k := -2; k <= 2; k++ {
		v.Copies = append(v.Copies, float64(k)*period)
	}
	var err error
	if v.Path, err = pathAttr(t.Contour); err != nil {
		return nil, err
	}
	if v.OuterPath, err = pathAttr(t.Outer); err != nil {
		return nil, err
	}
	// The groove's floor, without a stroke: out along the one wall and back along the other.
	floor := append(chain.Path(nil), t.Contour...)
	if n := len(t.Outer); n > 0 {
		back := t.Outer.Reverse()
		floor = append(floor, chain.Element{Kind: chain.Line, From: floor[len(floor)-1].To, To: back[0].From})
		floor = append(floor, back...)
		floor = append(floor, chain.Element{Kind: chain.Line, From: back[n-1].To, To: floor[0].From})
	}
	v.HubPath, err = pathAttr(floor)
	return v, err
}
