Heron river-level logger: sampling switch of the reference channel, rail to rail
* The reference may stand anywhere between the rails: a transmission gate.
.lib "heron180.lib" tt

.subckt tgate a b on onb vdd wn=6u wp=24u
Mn a on  b 0   nch W=wn L=0.18u
Mp a onb b vdd pch W=wp L=0.18u
*@ expect m? not saturation in track
*@ expect m? cutoff in hold
.ends tgate

Vdd  vdd  0 1.8
Vclk clk  0 PULSE(0 1.8 0 1n 1n 0.5u 1u)
Vclb clkb 0 PULSE(1.8 0 0 1n 1n 0.5u 1u)
Vref ref  0 0.9
X_sw  ref samp clk clkb vdd tgate
X_rst samp 0 rst rstb vdd tgate wn=2u wp=2u
C_hold samp 0 2p

*@ bias v(ref)=0..1.8 v(samp)=v(ref)
*@ mode track v(clk)=1.8 v(clkb)=0   v(rst)=0   v(rstb)=1.8
*@ mode hold  v(clk)=0   v(clkb)=1.8 v(rst)=0   v(rstb)=1.8
*@ expect x_rst.m? cutoff
.tran 1n 2u
.end
