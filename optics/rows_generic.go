package optics

const vectorLanes = 1

func fastObliquePhases(f *filmRow, w *waveRow, n, k, e []float64, d float64) bool {
	return obliquePhases(f, w, n, k, e, d)
}
func fastNormalPhases(f *filmRow, w *waveRow, n, k, e []float64, d float64) bool {
	return normalPhases(f, w, n, k, e, d)
}
func fastObliqueFields(f *filmRow, in, out *fieldRow, n, k, e, as, ap []float64) {
	obliqueFields(f, in, out, n, k, e, as, ap)
}
func fastNormalFields(f *filmRow, in, out *fieldRow, n, k, e, as []float64) {
	normalFields(f, in, out, n, k, e, as)
}
func fastMatrixRows(f *filmRow, n, k, e []float64)      { matrixRows(f, n, k, e) }
func fastNormalMatrixRow(f *filmRow, n, k, e []float64) { normalMatrixRow(f, n, k, e) }
func fastNormalMediumRow(m *mediumRow, n, k []float64)  { normalMediumRow(m, n, k) }
func fastObliqueMediumRow(m *mediumRow, w *waveRow, n, k []float64) bool {
	return obliqueMediumRow(m, w, n, k)
}
func fastSingleWaveRow(f *polarRow, t, hr, hi, lr, li *[lanes]float64, b int) {
	singleWaveRow(f, t, hr, hi, lr, li, b)
}
func fastOrderRow(f *polarRow, b int) bool { return orderRow(f, b) }
func fastLosslessAmplitudeRow(r, rr, ri, gain, h, l *[lanes]float64, f *polarRow, b int) {
	losslessAmplitudeRow(r, rr, ri, gain, h, l, f, b)
}
func fastShareRow(dst, gs, as, e []float64)             { shareRow(dst, gs, as, e) }
func fastMeanShareRow(dst, gs, gp, as, ap, e []float64) { meanShareRow(dst, gs, gp, as, ap, e) }
func fastFrontRow(w *waveRow, m *mediumRow, wavelength, front []float64, cos float64) {
	frontRow(w, m, wavelength, front, cos)
}
func fastScaleRow(dst, s []float64, ws float64)         { scaleRow(dst, s, ws) }
func fastMeanRow(dst, s, p []float64, ws, wp float64)   { meanRow(dst, s, p, ws, wp) }
func fastUnusualRow(n, k []float64, limit float64) bool { return unusualRow(n, k, limit) }
