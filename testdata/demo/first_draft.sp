Heron river-level logger: first draft of the sampling block, mistakes left in
* Each device below has one mistake that the reviewer is meant to see.
.lib 'heron180.lib' tt

Vdd  vdd 0 1.8
Vclk clk 0 1.8
* too narrow for the 60 ohms that the settling budget needs
M_sw   samp clk in 0 nch W=4u L=0.18u         ;@ expect deep triode ron<=60
C_hold samp 0 2p
* leaves saturation when the output goes high
M_load out vbp vdd vdd pch W=8u L=1u
M_amp  out ain 0   0   nch W=4u L=0.5u
* the bulk of this NMOS hangs on the supply
M_rst  samp rst 0 vdd nch W=1u L=0.18u
* nobody has written this model
M_lvl  lvl out 0 0 nch_lvt W=2u L=0.18u
R_lvl  vdd lvl 20k

*@ bias v(in)=0.1..0.6 v(samp)=v(in)-5m v(rst)=0
*@ bias v(ain)=0.545 v(vbp)=1.15 v(out)=0.5..1.75 v(lvl)=0.9
.op
.end
