package circuit

// The caps that keep any input from hanging or exhausting memory. Each is far
// above what people write.
const (
	maxIncludes   = 64       // files open inside each other
	maxReads      = 1 << 16  // files read, one included twice counting twice
	maxBases      = 16       // models that build on the next
	maxBlocks     = 64       // .subckt and .if open inside each other, a file
	maxCards      = 20 << 20 // cards read, a file included twice counting twice
	maxHierarchy  = 128      // instances inside each other
	maxCells      = 1 << 17  // distinct cells
	maxElements   = 20 << 20 // elements over all distinct cells
	maxRounds     = 64       // top-level conditionals that wait for each other
	maxParamDepth = 400      // parameters and functions that refer to the next
	maxSteps      = 1 << 20  // operations of one evaluation
)
