package main

import (
	"fmt"
	"strconv"
	"strings"

	"footing/plan"
	"footing/reports"

	"github.com/spf13/cobra"
)

func (a *app) sizeCommand() *cobra.Command {
	var b plan.BareSpec
	var effects []string
	var sides string
	c := &cobra.Command{
		Use:   "size",
		Short: "n or power of a planned study at given effects, without evidence",
		Long: `Gives the size that each effect needs, or with --n the power of a given size. Effects are given as people
read them: a standardized mean difference, a mean difference with --sd, a ratio for a binary outcome.
A range such as 0.2..0.6 is taken in five steps, 0.2..0.6/0.1 in steps of 0.1.`,
		Example: "  footing size --effect 0.5\n  footing size --effect 0.2..0.6/0.1 --power 0.9 --dropout 0.1\n  footing size --outcome binary --control-risk 0.3 --effect 0.6,0.7 --json\n  footing size --effect 0.5 --n 50",
		Args:    exactArgs(0, 0, "no argument"),
		RunE: func(_ *cobra.Command, _ []string) error {
			return a.size(b, effects, sides)
		},
	}
	f := c.Flags()
	f.StringSliceVar(&effects, "effect", nil, "effects: 0.5, or 0.2,0.5, or a range 0.2..0.6")
	f.IntVar(&b.N, "n", 0, "size of the first group; asks for power in place of a size")
	f.StringVar(&b.Outcome, "outcome", "", "continuous or binary (by the scale)")
	f.StringVar(&b.Scale, "scale", "", "scale of the effects (standardized-mean-difference; odds-ratio for a binary outcome)")
	f.StringVar(&b.Arrangement, "arrangement", "", "parallel, paired or single-group (parallel)")
	f.StringVar(&b.Test, "test", "", "test: t, z, pooled-z, fisher-exact (by the outcome)")
	f.Float64Var(&b.Power, "power", 0.80, "power to reach")
	f.Float64Var(&b.Alpha, "alpha", 0.05, "alpha, both sides together for a two-sided test")
	f.StringVar(&sides, "sides", "two", "one or two")
	f.StringVar(&b.Allocation, "allocation", "1:1", "treatment to control")
	f.Float64Var(&b.ControlRisk, "control-risk", 0, "risk in the control group, for a binary outcome")
	f.Float64Var(&b.SD, "sd", 0, "standard deviation, for a mean difference in natural units")
	f.Float64Var(&b.BaselineR, "baseline-correlation", 0, "correlation with a baseline measure that is adjusted for")
	f.Float64Var(&b.Dropout, "dropout", 0, "share of people who leave, 0 to below 1")
	a.jsonFlag(c)
	return c
}

func (a *app) size(b plan.BareSpec, effects []string, sides string) error {
	if len(effects) == 0 {
		return fmt.Errorf("footing size: no effect is given; add --effect, such as --effect 0.5")
	}
	for _, text := range effects {
		xs, err := effectRange(text)
		if err != nil {
			return err
		}
		b.Effects = append(b.Effects, xs...)
	}
	switch sides {
	case "one", "1":
		b.Sides = 1
	case "two", "2":
		b.Sides = 2
	default:
		return fmt.Errorf("footing size: --sides %q is neither one nor two", sides)
	}
	if b.N < 0 {
		return fmt.Errorf("footing size: --n %d is no number of people", b.N)
	}
	for name, v := range map[string]float64{"--power": b.Power, "--alpha": b.Alpha} {
		if !(v > 0 && v < 1) {
			return fmt.Errorf("footing size: %s must lie between 0 and 1; it is %g", name, v)
		}
	}
	s, err := plan.SizeBare(b)
	if err != nil {
		return err
	}
	if a.json {
		err = a.printJSON(s)
	} else {
		err = a.print(reports.TextSize(s, a.text()))
	}
	if err != nil {
		return err
	}
	for _, c := range s.Cases {
		if c.N == nil {
			return answerNo
		}
	}
	return nil
}

// mostEffects limits the effects of one range.
const mostEffects = 200

// effectRange reads "0.5", "0.2..0.6" (five steps) or "0.2..0.6/0.1".
func effectRange(text string) ([]float64, error) {
	bad := fmt.Errorf("footing size: --effect %q is no effect; write a number, or a range such as 0.2..0.6 or 0.2..0.6/0.1", text)
	from, rest, isRange := strings.Cut(strings.TrimSpace(text), "..")
	low, err := parseEffect(from)
	if err != nil {
		return nil, bad
	}
	if !isRange {
		return []float64{low}, nil
	}
	to, stepText, hasStep := strings.Cut(rest, "/")
	high, err := parseEffect(to)
	if err != nil || high <= low {
		return nil, bad
	}
	steps := 4
	if hasStep {
		step, err := parseEffect(stepText)
		if err != nil || !(step > 0) || (high-low)/step > mostEffects {
			return nil, bad
		}
		steps = int((high-low)/step + 1e-9)
		high = low + float64(steps)*step
	}
	out := make([]float64, steps+1)
	for i := range out {
		x := low + (high-low)*float64(i)/float64(max(steps, 1))
		out[i], _ = strconv.ParseFloat(strconv.FormatFloat(x, 'g', 12, 64), 64) // 0.3, not 0.30000000000000004
	}
	return out, nil
}

func parseEffect(s string) (float64, error) {
	s = strings.TrimSpace(s)
	if s == "" || strings.Trim(s, "+-.0123456789eE") != "" {
		return 0, fmt.Errorf("%q is no number", s)
	}
	return strconv.ParseFloat(s, 64)
}
