Heron river-level logger: load switch of the 3.3 V sensor rail
* 40 mA into the pressure sensor; 60 mV may drop across the switch.
.lib 'heron180.lib' tt

Vsup   vin  0 3.3
Ven    en   0 1.8
R_pull vin  gate 100k
M_drv  gate en 0 0 nio W=10u L=0.35u      ;@ expect triode in powered
M_pass rail gate vin vin pio W=500u L=0.35u m=4
+      ;@ expect deep triode ron<=1.5 vds<=60m in powered
R_load rail 0 82

*@ mode powered v(en)=1.8 v(gate)=5m v(rail)=3.24..3.26
*@ mode off     v(en)=0   v(gate)=3.3 v(rail)=0
*@ expect m_* cutoff in off
*@ rating ?io vgs<=3.63 vds<=3.63 vgd<=3.63
.op
.end
