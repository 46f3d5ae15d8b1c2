package prose

// lists pairs the intervals of a list with the estimates of the list before it:
// "81% and 64% (95% CI 70–89 and 52–75, respectively)".
func (p *para) lists() {
	for i := 0; i < len(p.cands); i++ {
		j := i + 1
		for j < len(p.cands) && p.r.Items[p.cands[j].item].Follows {
			j++
		}
		if j-i > 1 {
			p.pair(p.cands[i:j])
		}
		i = j - 1
	}
}

// pair gives the last numbers before the list to its intervals, in order, where
// each then lies in its bounds.
func (p *para) pair(list []cand) {
	from, _ := p.sentence(p.r.Items[list[0].item].Start)
	at := len(list) - 1
	picked := make([]int, len(list))
	for k := list[0].item - 1; k >= 0 && at >= 0 && p.r.Items[k].Start >= from; k-- {
		if _, ok := p.estimable(k); ok {
			picked[at] = k
			at--
		}
	}
	if at >= 0 {
		return
	}
	for i := range list {
		n, _ := p.estimable(picked[i])
		f, ok := n.Float()
		if !ok || p.within(&list[i], f) != inside {
			return
		}
	}
	for i := range list {
		list[i].est, _ = p.estimable(picked[i])
		list[i].estItem, list[i].flags = picked[i], nil
	}
}
