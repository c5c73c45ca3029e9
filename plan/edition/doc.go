// Package edition keeps dated, frozen runs of a plan beside its plan file and compares them.
//
// The store is a folder, "plan.editions" for plan.yaml, made for version control: one JSON file for each edition
// (001.json, 002.json, ...) and a copy of each evidence file that an edition used, named by its content. An edition is
// never changed: it carries the hash of its own text and of the edition before, so that a broken or edited one can be
// named.
package edition
