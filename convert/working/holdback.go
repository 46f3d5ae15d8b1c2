package working

import "halfspan/extract/result"

// holdBack is a cause to take back an SD that was read or worked out: one that
// rests on a guess is worse than none.
type holdBack struct {
	reason string
	found  func(*item) bool
}

// holdBacks are looked at when all that the results of a paper say of each other
// is known; the first that applies gives the reason.
func holdBacks() []holdBack {
	return []holdBack{
		{"the paper declares more than one meaning of its spreads: which one this has is open", func(it *item) bool {
			return it.has("conventions-differ")
		}},
		{"what the spread is rests on a general statement of the paper, and the reading of this sentence is doubtful", func(it *item) bool {
			return it.rec().Use == useConverted && it.generalKind() && it.doubtful()
		}},
		{"the spreads of this estimate do not belong to one n and level", func(it *item) bool {
			return it.rec().Use == useConverted && it.has("mates-disagree")
		}},
		{"printed as an SE, but its size beside the others says that it is an SD", func(it *item) bool {
			return it.rec().Use == useConverted && it.has("sd-as-se")
		}},
		{"two places give different n", func(it *item) bool {
			return it.rec().Use == useConverted && it.has("n-conflict")
		}},
	}
}

// generalKind reports that nothing beside the result says what its spread is, only
// a general statement in the methods, a legend or elsewhere in the text.
func (it *item) generalKind() bool {
	for _, s := range it.res.Sources {
		if s.Field == "given_as" {
			return it.res.Table == "" && s.From != "" && !s.ByPerson()
		}
	}
	return false
}

// doubtful reports that a flag makes the reading doubtful, besides that it stands
// in running text, as all do that are asked.
func (it *item) doubtful() bool {
	effects := effectOf(Flags())
	effects["in-running-text"] = AsksLook
	return rate(it, effects) == Doubtful
}

// holdBackGuesses withholds the SD where a cause says so. What it would have been
// stays beside as a proposal that a person may take.
func holdBackGuesses(it *item) {
	if it.rec().Use == useWithheld {
		return
	}
	for _, h := range holdBacks() {
		if h.found(it) {
			it.takeBack(h.reason)
			return
		}
	}
}

// takeBack withholds an SD that was given and offers it as a proposal.
func (it *item) takeBack(reason string) {
	rec := it.rec()
	name := "if it is an SD"
	switch it.res.GivenAs {
	case result.SE:
		name = "if it is an SE and n is right"
	case result.CI:
		name = "if it is the interval of a mean and n is right"
	}
	it.offer(Alternative{Name: name, Mean: rec.Mean, SD: rec.SD, SE: rec.SE, Low: rec.SDLow, High: rec.SDHigh, Note: "withheld: " + reason})
	rec.SD, rec.SDLow, rec.SDHigh, rec.SDNormal, rec.SDOf, rec.Method = nil, nil, nil, nil, nil, nil
	if it.res.GivenAs == result.SD {
		rec.SE, rec.Scale = nil, nil
	}
	it.w.Trail.Method = ""
	it.withhold(reason)
}
