// Command footing sizes a study from a spreadsheet of earlier ones.
package main

func main() {}
