Heron river-level logger: gain stage with a mirrored load
* One common-source stage; the mirror takes 10 uA from the bias block.
.lib 'heron180.lib' tt

Vdd vdd 0 1.8
Ib  vbp 0 10u
M_ref  vbp vbp vdd vdd pch W=8u L=1u    ;@ expect saturation margin>=200m
M_load out vbp vdd vdd pch W=8u L=1u    ;@ expect saturation margin>=200m
M_amp  out in  0   0   nch W=4u L=0.5u  ;@ expect saturation margin>=200m ic>=1
C_l    out 0 0.5p

*@ bias v(in)=0.545 v(vbp)=1.15 v(out)=0.5..1.3
.op
.end
