package cut

// finest looks among the purchases of one price for the loads that open the fewest
// stocks and leave the least scrap. Not done yet: any loads of the least price stand.
func (p *problem) finest(loads []load, _ []purchase, _ int64) []load {
	return loads
}
