Overdrive from a drain current
* Sedra & Smith, Microelectronic Circuits, 6th ed., problem 5.18: k'W/L = 0.1 mA/V2, VT = 0.5 V;
* 12.5 and 50 uA in saturation need an overdrive of 0.5 and 1.0 V; 0.5 %.
.model n1 nmos level=1 kp=0.1m vto=0.5
M_a d ga 0 0 n1 W=1u L=1u
M_b d gb 0 0 n1 W=1u L=1u
*@ bias v(d)=2 v(ga)=1.0 v(gb)=1.5
*@ expect m_a saturation vov=0.4975..0.5025 id=12.44u..12.56u
*@ expect m_b saturation vov=0.995..1.005   id=49.75u..50.25u
.end
