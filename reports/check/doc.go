// Package check computes a report again from the plan and the evidence that the report itself carries, and compares every number that it prints. It is for a
// reviewer who has only the file. What comes out again is 'printed digits reproduced', no more: the same program made both, and a wrong plan is
// reproduced as faithfully as a right one.
package check
