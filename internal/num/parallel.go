package num

import (
	"runtime"
	"sync"
)

// Chunks runs work(chunk) for chunk = 0 .. count-1 on all cores. The caller stores each chunk's result at its own index and adds them up in order
// afterwards, so that the answer does not depend on the number of cores.
func Chunks(count int, work func(chunk int)) {
	workers := min(runtime.GOMAXPROCS(0), count)
	if workers <= 1 {
		for i := 0; i < count; i++ {
			work(i)
		}
		return
	}
	var group sync.WaitGroup
	next := make(chan int)
	for w := 0; w < workers; w++ {
		group.Add(1)
		go func() {
			defer group.Done()
			for i := range next {
				work(i)
			}
		}()
	}
	for i := 0; i < count; i++ {
		next <- i
	}
	close(next)
	group.Wait()
}
