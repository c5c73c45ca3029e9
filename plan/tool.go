package plan

import "footing/plan/result"

// Version is the program's version; a release sets it when it is built.
var Version = "0.1.0"

// ThisTool names the program in a result.
func ThisTool() result.Tool { return result.Tool{Name: "footing", Version: Version} }
