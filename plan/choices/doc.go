// Package choices puts in order what a plan would be if one thing about it were chosen otherwise. It works on results alone and computes no size itself.
package choices
