package terrain
import ("testing";"path/filepath";"ridgehop/internal/raster";"fmt";"time")
func BenchmarkScr(b *testing.B){
 folder,_,_:=benchmarkTile(b)
 l:=raster.NewLibrary(); p:=filepath.Join(folder,"N50W003.hgt")
 h:=make([]float32,3601*73)
 var to,tr time.Duration; n:=0
 for b.Loop() {
  s:=time.Now(); d,err:=l.Open(p); must(b,err); to+=time.Since(s)
  for k:=range 5 { s=time.Now(); must(b,d.Read(0,1500+73*k,3601,73,h)); tr+=time.Since(s) }
  d.Close(); n++
 }
 fmt.Println(to/time.Duration(n), tr/time.Duration(n*5))
}
