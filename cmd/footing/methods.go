package main

import (
	"fmt"
	"strings"

	"footing/plan"
	"footing/plan/result"
	"footing/reports"

	"github.com/spf13/cobra"
)

func (a *app) methodsCommand() *cobra.Command {
	var schema string
	c := &cobra.Command{
		Use:   "methods [NAME]",
		Short: "Each method: what it assumes, when it misleads, its reference",
		Long: `Lists the methods, or explains one. With --schema it prints the JSON Schema of a command's document:
` + strings.Join(plan.SchemaNames(), ", ") + ` (plan when none is named).`,
		Example: "  footing methods\n  footing methods hartung-knapp\n  footing methods --schema=pool",
		Args:    exactArgs(0, 1, "at most one method"),
		RunE: func(c *cobra.Command, args []string) error {
			if c.Flags().Changed("schema") {
				return a.schema(schema)
			}
			return a.methods(args)
		},
	}
	c.Flags().StringVar(&schema, "schema", "", "print the JSON Schema of a document")
	c.Flags().Lookup("schema").NoOptDefVal = "plan"
	a.jsonFlag(c)
	return c
}

func (a *app) schema(name string) error {
	data := plan.Schema(name)
	if data == nil {
		return fmt.Errorf("footing methods: there is no schema %q; there are %s", name, strings.Join(plan.SchemaNames(), ", "))
	}
	_, err := a.out.Write(data)
	return err
}

func (a *app) methods(args []string) error {
	list := plan.Methods()
	if len(args) == 1 {
		m, near, ok := plan.FindMethod(args[0])
		if !ok {
			mend := "footing methods lists them"
			if near != "" {
				mend = fmt.Sprintf("did you mean %q?", near)
			}
			return fmt.Errorf("footing methods: there is no method %q; %s", args[0], mend)
		}
		list = []plan.Method{m}
	}
	switch {
	case a.json:
		return a.printJSON(&result.Manual{Schema: "footing/methods/1", Tool: plan.ThisTool(), Methods: list})
	case len(args) == 1:
		return a.print(reports.TextMethod(list[0], a.text()))
	}
	return a.print(reports.TextMethods(list, a.text()))
}
