package num

import "testing"

func BenchmarkNoncentralTCDF(b *testing.B) {
	s := 0.0
	for i := 0; i < b.N; i++ {
		s += NoncentralTCDF(1.98, 98, 2.5+float64(i%8)/16)
	}
	_ = s
}

func BenchmarkNoncentralTCDFSmallDF(b *testing.B) {
	for i := 0; i < b.N; i++ {
		NoncentralTCDF(2.1, 8, 2.5)
	}
}

func BenchmarkStudentTQuantileUpper(b *testing.B) {
	for i := 0; i < b.N; i++ {
		StudentTQuantileUpper(0.025, float64(20+i%200))
	}
}

func BenchmarkStudentTSurvival(b *testing.B) {
	for i := 0; i < b.N; i++ {
		StudentTSurvival(2.1, float64(20+i%200))
	}
}

func BenchmarkChiSquaredQuantile(b *testing.B) {
	for i := 0; i < b.N; i++ {
		ChiSquaredQuantile(0.025, float64(5+i%30))
	}
}

func BenchmarkNormalSurvival(b *testing.B) {
	for i := 0; i < b.N; i++ {
		NormalSurvival(1.5)
	}
}
