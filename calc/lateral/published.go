package lateral

import "quoin/calc/published"

// Published is every published case of this package.
func Published() []published.Case { return append(publishedStatic(), publishedDrift()...) }
