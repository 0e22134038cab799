package samples
import ("testing";"fmt";"time")
func TestZZ(t *testing.T){ l:=eigenvalues(t,"frame"); fmt.Println(l[:12], l[len(l)-5:]); s:=time.Now(); Build("plate:3162"); fmt.Println(time.Since(s)); l=eigenvalues(t,"feeder"); fmt.Println(l[:3], l[len(l)-3:]); l=eigenvalues(t,"strut"); fmt.Println(l[:3], l[len(l)-3:])}
