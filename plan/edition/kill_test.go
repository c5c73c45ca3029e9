package edition

import (
	"bufio"
	"bytes"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"
)

// keeperEnv turns this test program into a process that keeps editions until it is killed.
const keeperEnv = "FOOTING_KEEPS_EDITIONS_IN"

func TestMain(m *testing.M) {
	if dir := os.Getenv(keeperEnv); dir != "" {
		keepForever(Store{Dir: dir})
	}
	os.Exit(m.Run())
}

// keepForever prints the number of each edition once it is kept.
func keepForever(s Store) {
	for i := 0; ; i++ {
		text := fmt.Sprintf("%d %d %s", os.Getpid(), i, strings.Repeat("long enough to be cut ", 400))
		ev := []byte(text)
		e := made(text, ev)
		if err := s.Keep(e, ev, true); err != nil {
			fmt.Println("error", err)
			os.Exit(1)
		}
		fmt.Println(e.Number)
	}
}

// TestNothingIsLostWhenKilled kills a process that keeps editions, at moments drawn from a fixed seed, 200 times or
// more. After each kill the chain is whole, every edition that was said to be kept is there, and work goes on.
func TestNothingIsLostWhenKilled(t *testing.T) {
	kills, perStore := 204, 12
	if testing.Short() {
		kills = 24
	}
	random := rand.New(rand.NewPCG(20261103, 1))
	keptAll := 0
	for done := 0; done < kills; done += perStore {
		s := store(t)
		before := 0
		for range perStore {
			said := killed(t, s, time.Duration(random.IntN(9000))*time.Microsecond)
			all, err := s.Read()
			if err != nil {
				t.Fatalf("after a kill: %v", err)
			}
			if len(all) < said || len(all) < before {
				t.Fatalf("%d editions are there, %d were kept before and %d said to be kept", len(all), before, said)
			}
			before = len(all)
		}
		keep(t, s, "after the kills")
		left, _ := filepath.Glob(filepath.Join(s.Dir, tempPattern))
		if len(left) > 0 {
			t.Errorf("left behind: %v", left)
		}
		keptAll += before
	}
	if keptAll < kills/2 {
		t.Errorf("only %d editions were kept in %d runs: the kills came too early to test anything", keptAll, kills)
	}
}

// killed runs a keeper, kills it the given time after its first edition, and gives the last number that it said.
func killed(t *testing.T, s Store, after time.Duration) int {
	t.Helper()
	c := exec.Command(os.Args[0])
	c.Env = append(os.Environ(), keeperEnv+"="+s.Dir)
	pipe, err := c.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	lines := bufio.NewReader(pipe)
	first, err := lines.ReadString('\n')
	if err != nil {
		t.Fatalf("the keeper ended by itself: %v", err)
	}
	time.Sleep(after)
	c.Process.Kill()
	var rest bytes.Buffer
	rest.ReadFrom(lines)
	c.Wait()
	said := 0
	for _, l := range strings.Split(first+rest.String(), "\n") {
		if strings.HasPrefix(l, "error") {
			t.Fatal(l)
		}
		if n, err := strconv.Atoi(l); err == nil {
			said = max(said, n)
		}
	}
	return said
}
