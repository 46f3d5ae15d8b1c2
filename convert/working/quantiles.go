package working

// proposeFromMedian leaves mean and SD empty: the published methods are shown as
// proposals, and a person may take one.
func proposeFromMedian(it *item) {
	it.withhold("a median: the published methods give proposals only, none is taken")
}
