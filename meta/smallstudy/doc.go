// Package smallstudy asks whether small studies show larger effects, and what would be left of the pooled effect under each method's own assumption about why.
// Its results stand side by side; none is the truth, and with fewer than 10 studies none can reassure.
package smallstudy
