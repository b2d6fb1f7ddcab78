package parser

import "github.com/alecthomas/participle/v2/lexer"

// biasG is `bias v(a)=0.9 v(b)=0..1.8` behind its word.
type biasG struct {
	Word    lexer.Token `parser:"@Word"`
	Assigns []*assignG  `parser:"@@+"`
}

// biasFromG is `bias from "file.csv"`.
type biasFromG struct {
	Word lexer.Token `parser:"@Word 'from'"`
	Path lexer.Token `parser:"@String"`
}

// assignG is `v(node)=lo` or `v(node)=lo..hi`.
type assignG struct {
	Func lexer.Token `parser:"@Probe Open"`
	Node lexer.Token `parser:"@Node Close '='"`
	Lo   *exprG      `parser:"@@"`
	Hi   *exprG      `parser:"( Range @@ )?"`
}

// modeG is `mode name v(a)=…`.
type modeG struct {
	Word    lexer.Token `parser:"@Word"`
	Name    lexer.Token `parser:"@Word"`
	Assigns []*assignG  `parser:"@@*"`
}

// cornerG is `corner name temp=125 lib=ss v(a)=1.62 vto=+40m u0=*0.9`.
type cornerG struct {
	Word  lexer.Token    `parser:"@Word"`
	Name  lexer.Token    `parser:"@Word"`
	Items []*cornerItemG `parser:"@@*"`
}

type cornerItemG struct {
	Assign *assignG    `parser:"  @@"`
	Lib    lexer.Token `parser:"| 'lib' '=' @(Word | String)"`
	Tweak  *tweakG     `parser:"| @@"`
}

type tweakG struct {
	Name  lexer.Token `parser:"@Key '='"`
	Op    lexer.Token `parser:"@('+' | '-' | '*')?"`
	Value *exprG      `parser:"@@"`
}

// expectG is `expect target claims`; without a target it speaks of the element that
// it stands behind.
type expectG struct {
	Word   lexer.Token `parser:"@Word"`
	Path   *pathG      `parser:"(  @@"`
	Settle *settleG    `parser:" | @@"`
	Node   *nodeG      `parser:" | @@"`
	Device lexer.Token `parser:" | @Word )?"`
	Claims []*claimG   `parser:"@@*"`
}

// pathG is `path(a,b)`.
type pathG struct {
	From lexer.Token `parser:"'path' Open @Node ','"`
	To   lexer.Token `parser:"@Node Close"`
}

// settleG is `settle(node)`.
type settleG struct {
	Node lexer.Token `parser:"'settle' Open @Node Close"`
}

// nodeG is `v(node)` and what is expected of it.
type nodeG struct {
	Func lexer.Token `parser:"@Probe Open"`
	Node lexer.Token `parser:"@Node Close"`
	Op   lexer.Token `parser:"@(Compare | Assign)"`
	Lo   *exprG      `parser:"@@"`
	Hi   *exprG      `parser:"( Range @@ )?"`
}

// claimG is one thing expected: a region, a condition, a time, or where it holds.
type claimG struct {
	Not     lexer.Token   `parser:"(  @'not'?"`
	Region  lexer.Token   `parser:"   @Region"`
	Cond    *condG        `parser:" | @@"`
	Within  *exprG        `parser:" | 'within' @@"`
	Bits    *bitsG        `parser:" | 'to' @@"`
	Modes   []lexer.Token `parser:" | 'in' @( Word ( ','? Word )* )"`
	Corners []lexer.Token `parser:" | 'at' @( Word ( ','? Word )* ) ) ','?"`
}

// bitsG is `12bit`.
type bitsG struct {
	Count *exprG      `parser:"@@"`
	Unit  lexer.Token `parser:"@('bit' | 'bits')?"`
}

// condG is `quantity op limit`, or `quantity=lo..hi`.
type condG struct {
	Quantity lexer.Token `parser:"@Key"`
	Op       lexer.Token `parser:"@(Compare | Assign)"`
	Lo       *exprG      `parser:"@@"`
	Hi       *exprG      `parser:"( Range @@ )?"`
}

// ratingG is `rating model vgs<=1.98 …`.
type ratingG struct {
	Word  lexer.Token `parser:"@Word"`
	Model lexer.Token `parser:"@Word"`
	Conds []*condG    `parser:"@@+"`
}

// fitG is `fit model nmos vto=0.42 …`.
type fitG struct {
	Word   lexer.Token `parser:"@Word"`
	Model  lexer.Token `parser:"@Word"`
	Type   lexer.Token `parser:"@Word"`
	Params []*settingG `parser:"@@*"`
}

// accessG is `access model rs=9.1 rd=9.1`.
type accessG struct {
	Word   lexer.Token `parser:"@Word"`
	Model  lexer.Token `parser:"@Word"`
	Params []*settingG `parser:"@@+"`
}

type settingG struct {
	Name  lexer.Token `parser:"@Key '='"`
	Value *exprG      `parser:"@@"`
}

// allowG is `allow rule [on target] "reason"`.
type allowG struct {
	Word   lexer.Token `parser:"@Word"`
	Rule   lexer.Token `parser:"@Word"`
	On     lexer.Token `parser:"( 'on' @Word )?"`
	Reason lexer.Token `parser:"@String"`
}

var (
	biasGrammar     = grammarFor[biasG]()
	biasFromGrammar = grammarFor[biasFromG]()
	modeGrammar     = grammarFor[modeG]()
	cornerGrammar   = grammarFor[cornerG]()
	expectGrammar   = grammarFor[expectG]()
	ratingGrammar   = grammarFor[ratingG]()
	fitGrammar      = grammarFor[fitG]()
	accessGrammar   = grammarFor[accessG]()
	allowGrammar    = grammarFor[allowG]()
)
