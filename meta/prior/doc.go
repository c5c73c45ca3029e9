// Package prior holds the effect of the planned study as a distribution: what the next study's true effect may plausibly be, given the earlier ones.
package prior
