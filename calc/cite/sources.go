package cite

// Sources is every publication that the program cites, in alphabetical order of
// key. Read is set only where the value used was read in the source itself.
var Sources = []Source{
	{Key: "ASCE/SEI 7-22", Text: "ASCE/SEI 7-22, Minimum Design Loads and Associated Criteria for Buildings and Other Structures. American Society of Civil Engineers, 2022."},
}
