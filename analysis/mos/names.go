package mos

import (
	"slices"
	"strings"
	"sync"
	"triodeck/parser/spelling"
)

// families lists every model there is. To add one, write its file and put a
// line here.
var families = []family{
	{label: "level 1", levels: []int{1}, names: classicNames, compile: compileLevel1},
	{label: "level 2", levels: []int{2}, names: classicNames, compile: compileLevel2},
	{label: "level 3", levels: []int{3}, names: classicNames, compile: compileLevel3},
	{label: "EKV 2.6", levels: []int{44, 55}, names: ekv26Names, compile: compileEKV26},
	{label: "BSIM3v3", levels: []int{8, 49, 53}, names: bsim3Names, compile: compileBSIM3},
	{label: "BSIM4", levels: []int{14, 54}, names: bsim4Names, compile: compileBSIM4},
}

// vocabulary is the set of parameter names of a `.model` card.
type vocabulary struct {
	list []string
	set  map[string]bool
}

// words makes a vocabulary of space-separated names, at first use.
func words(text ...string) func() vocabulary {
	return sync.OnceValue(func() vocabulary {
		v := vocabulary{set: map[string]bool{}}
		for _, t := range text {
			for _, n := range strings.Fields(t) {
				if !v.set[n] {
					v.set[n] = true
					v.list = append(v.list, n)
				}
			}
		}
		return v
	})
}

// KnownParams lists the parameter names of the model that a card selects, in
// lower case; nil when its level is not modelled.
func KnownParams(c Card) []string {
	f := familyOf(c, &params{card: c.Params})
	if f == nil {
		return nil
	}
	return slices.Clone(f.names().list)
}

// unknown notes the parameters that the model does not have, each with the
// nearest name that it does.
func unknown(card map[string]float64, f *family) []Note {
	known := f.names()
	var odd []string
	for name := range card {
		if !known.set[name] {
			odd = append(odd, name)
		}
	}
	slices.Sort(odd)
	var notes []Note
	for _, name := range odd {
		text := "\"" + name + "\" is not a parameter of " + f.label
		if near := spelling.Nearest(name, known.list); near != "" {
			text += ": did you mean \"" + near + "\"?"
		}
		notes = append(notes, Note{Param: name, Text: text})
	}
	return notes
}

// selectors are names that cards of every level may carry: selection and
// binning, which the deck's own layer reads.
const selectors = `level version type tnom tref lmin lmax wmin wmax lref wref binflag
 binunit scale scalm nfmin nfmax lotgroup mfg`

// classicNames is the parameter set of levels 1 to 3, UCB/ERL M80/7, with the
// geometry, junction and layout names that vendor cards add.
var classicNames = words(selectors, `vto vt0 kp gamma phi lambda rd rs rsh tox nsub nss tpg uo u0 ld
 xj nfs delta theta eta kappa vmax neff ucrit uexp utra xqc
 is js n pb cbd cbs cj mj cjsw mjsw cgso cgdo cgbo kf af fc tt jssw pbsw php
 xl xw wd del lmlt wmlt dl dw acm hdif ldif rdc rsc cjgate jsw nds vnds alpha vcr iirat
 nlev gdsnoi gdsnoise capop bex tcv trd trs trs1 trd1 tlev tlevc lap wap`)
