package reports

// The colours of the inks, light and dark. Evidence is blue and plan is orange in both; a pair that stays apart for
// the usual kinds of colour blindness. Text inks keep 4.5 to 1 on the paper and on both washes, marks 3 to 1: a test
// computes it. The style sheet of the page is written from these maps.
var lightInks = map[ink]string{
	inkText:         "#1b2430",
	inkSoft:         "#56616d",
	inkFaint:        "#87909a",
	inkLine:         "#e3e6e8",
	inkPaper:        "#fffefb",
	inkEvidence:     "#23598c",
	inkEvidenceWash: "#dbe6f0",
	inkPlan:         "#a84a0c",
	inkPlanWash:     "#f7e6d8",
}

var darkInks = map[ink]string{
	inkText:         "#e8eaec",
	inkSoft:         "#a9b2bc",
	inkFaint:        "#77828e",
	inkLine:         "#2d353e",
	inkPaper:        "#14191f",
	inkEvidence:     "#7db4e6",
	inkEvidenceWash: "#233a50",
	inkPlan:         "#f0a265",
	inkPlanWash:     "#40291a",
}

// inkOrder is the order in which the inks stand in the style sheet.
var inkOrder = []ink{inkText, inkSoft, inkFaint, inkLine, inkPaper, inkEvidence, inkEvidenceWash, inkPlan, inkPlanWash}
