package cite

// Sources is every publication that the program cites, in alphabetical order of
// key. Read is set only where the value used was read in the source itself.
var Sources = []Source{
	{Key: "2018 IBC", Text: "2018 International Building Code, Section 1613, Earthquake loads. International Code Council.", Read: true},
	{Key: "ASCE/SEI 7-16", Text: "ASCE/SEI 7-16, Minimum Design Loads and Associated Criteria for Buildings and Other Structures. American Society of Civil Engineers, 2016."},
	{Key: "ASCE/SEI 7-22", Text: "ASCE/SEI 7-22, Minimum Design Loads and Associated Criteria for Buildings and Other Structures. American Society of Civil Engineers, 2022."},
	{Key: "ASCE/SEI article on 7-22 ground motions", Text: "Article of the Structural Engineering Institute of ASCE on the ground motions of ASCE/SEI 7-22.", Read: true},
	{Key: "Arias 1970", Text: "A. Arias, A measure of earthquake intensity. In Seismic Design for Nuclear Power Plants, MIT Press, 1970."},
	{Key: "Boore & Bommer 2005", Text: "D. M. Boore and J. J. Bommer, Processing of strong-motion accelerograms: needs, options and consequences. Soil Dynamics and Earthquake Engineering 25, 2005, 93-115."},
	{Key: "Boore 2005", Text: "D. M. Boore, On pads and filters: processing strong-motion data. Bulletin of the Seismological Society of America 95(2), 2005, 745-750."},
	{Key: "Butterworth 1930", Text: "S. Butterworth, On the theory of filter amplifiers. Experimental Wireless and the Wireless Engineer 7, 1930, 536-541."},
	{Key: "CIVL 7119/8119", Text: "CIVL 7119/8119, university notes: a three-storey modal analysis.", Read: true},
	{Key: "Chopra", Text: "A. K. Chopra, Dynamics of Structures: Theory and Applications to Earthquake Engineering. Prentice Hall."},
	{Key: "Chopra (reprint)", Text: "Reprint of the modal contribution factors of A. K. Chopra, Dynamics of Structures, 2nd ed., Table 12.11.1.", Read: true},
	{Key: "Clough & Penzien", Text: "R. W. Clough and J. Penzien, Dynamics of Structures. McGraw-Hill."},
	{Key: "Converse & Brady 1992", Text: "A. M. Converse and A. G. Brady, on the processing of strong-motion accelerograms. US Geological Survey Open-File Report 92-296A, 1992."},
	{Key: "Der Kiureghian 1981", Text: "A. Der Kiureghian, A response spectrum method for random vibration analysis of MDF systems. Earthquake Engineering and Structural Dynamics 9, 1981."},
	{Key: "EN 1998-1:2004", Text: "EN 1998-1:2004, Eurocode 8: Design of structures for earthquake resistance, Part 1: General rules, seismic actions and rules for buildings. CEN, 2004."},
	{Key: "EPRI 1988", Text: "EPRI NP-5930, A Criterion for Determining Exceedance of the Operating Basis Earthquake. Electric Power Research Institute, 1988."},
	{Key: "FEMA 451", Text: "FEMA 451, NEHRP Recommended Provisions: Design Examples. Federal Emergency Management Agency."},
	{Key: "Housner 1952", Text: "G. W. Housner, Spectrum intensities of strong-motion earthquakes. Proceedings of the Symposium on Earthquake and Blast Effects on Structures, EERI, 1952."},
	{Key: "Kaiser 1974", Text: "J. F. Kaiser, Nonrecursive digital filter design using the I0-sinh window function. Proceedings of the IEEE International Symposium on Circuits and Systems, 1974, 20-23."},
	{Key: "Newmark & Hall 1982", Text: "N. M. Newmark and W. J. Hall, Earthquake Spectra and Design. EERI Monograph, 1982."},
	{Key: "Nigam & Jennings 1969", Text: "N. C. Nigam and P. C. Jennings, Calculation of response spectra from strong-motion earthquake records. Bulletin of the Seismological Society of America 59(2), 1969, 909-922."},
	{Key: "TCVN 9386:2012", Text: "TCVN 9386:2012, national adoption of EN 1998-1 in Vietnam, table of the type 1 spectrum.", Read: true},
	{Key: "Taly", Text: "N. Taly, Design of Reinforced Masonry Structures, Example 7.11, pp. 7.56-7.57 (author and edition from memory).", Read: true},
	{Key: "Taranath", Text: "B. S. Taranath, Wind and Earthquake Resistant Buildings, two-storey modal example and Fig. 2.48.", Read: true},
	{Key: "Trifunac & Brady 1975", Text: "M. D. Trifunac and A. G. Brady, A study on the duration of strong earthquake ground motion. Bulletin of the Seismological Society of America 65(3), 581-626, 1975."},
	{Key: "US NRC RG 1.92", Text: "US Nuclear Regulatory Commission, Regulatory Guide 1.92, Combining Modal Responses and Spatial Components in Seismic Response Analysis."},
	{Key: "USGS design reports", Text: "US Geological Survey, design maps reports filed with county offices (tables of the 2015 IBC).", Read: true},
	{Key: "Wilson et al. 1981", Text: "E. L. Wilson, A. Der Kiureghian and E. P. Bayo, A replacement for the SRSS method in seismic analysis. Earthquake Engineering and Structural Dynamics 9, 1981."},
}
