Heron river-level logger: sampling switch of the level channel, one NMOS
* The level sensor's amplifier swings 0.1 to 0.6 V, so a single NMOS will do.
.lib 'heron180.lib' tt
.param wsw=36u

Vdd    vdd 0 1.8
Vclk   clk 0 PULSE(0 1.8 0 1n 1n 0.5u 1u)
Vin    in  0 DC 0.35
M_sw   samp clk in 0 nch W=wsw L=0.18u  ;@ expect deep triode ron<=60 in track
C_hold samp 0 2p

*@ bias v(in)=0.1..0.6 v(samp)=v(in)-5m
*@ mode track v(clk)=v(vdd)
*@ mode hold  v(clk)=0
*@ corner slow temp=85 lib=ss v(vdd)=1.62
*@ expect m_sw cutoff in hold
*@ rating nch vgs<=1.98 vds<=1.98 vgd<=1.98
.tran 1n 2u
.end
