// Package rules holds the rules, one file each with its text beside it. Its one
// invariant: a rule speaks only when a designer would agree, and stays silent
// where a missing file or an unknown name leaves it unsure. It reads no file and
// evaluates no device.
package rules

import "triodeck/analysis"

// All is every rule, by group. To add one, write its file and its page, and put
// a line here.
var All = []*analysis.Rule{
	// Files and structure
	NotADeck,
	Syntax,
	TitleElement,
	IncludeMissing,
	Structure,
	Parameter,
	Settings,
	// Names and connection
	DuplicateName,
	ModelUndefined,
	SubcktUndefined,
	PinCount,
	FloatingGate,
	// Devices and bias
	ModelBin,
	ImplausibleGeometry,
	ExpectationFailed,
	RegionCrossed,
	RatingExceeded,
	BulkBias,
	// The annotations themselves
	AnnotationInvalid,
	StaleAnnotation,
	NotEvaluated,
}

// ByName is the rule of a name, nil if there is none.
func ByName(name string) *analysis.Rule {
	for _, r := range All {
		if r.Name == name {
			return r
		}
	}
	return nil
}
