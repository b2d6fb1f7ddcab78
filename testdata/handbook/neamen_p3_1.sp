Triode resistance, chord and small-Vds law
* Neamen, Microelectronics: Circuit Analysis and Design, problem 3.1 (title from memory):
* k' = 80 uA/V2, W/L = 10/1.2, VT = 0.8 V, VDS = 0.1 V at VGS = 1, 2, 3 V.
* Currents 10.0, 76.7, 143 uA; chord Ron 10.0 k, 1304, 698 ohm; 1/(k Vov) 7500, 1250, 682 ohm; 0.5 %.
.model n1 nmos level=1 kp=80u vto=0.8
M_a d ga 0 0 n1 W=10u L=1.2u
M_b d gb 0 0 n1 W=10u L=1.2u
M_c d gc 0 0 n1 W=10u L=1.2u
*@ bias v(d)=0.1 v(ga)=1 v(gb)=2 v(gc)=3
*@ expect m_a triode id=9.95u..10.05u   ron=9.95k..10.05k
*@ expect m_b triode id=76.3u..77.1u    ron=1297..1311
*@ expect m_c triode id=142.3u..143.8u  ron=694.5..701.5
.end
