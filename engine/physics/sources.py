"""The bibliography: where each law is published. A key names the work, the value its full reference."""

SOURCES: dict[str, str] = {
    "circuit law": "Kirchhoff's laws and Ohm's law",
    "definition": "definition of the quantity",
    "wcca": "Extreme-value analysis as in ECSS-Q-HB-30-01A, Worst case analysis",
    "jesd77": "JEDEC JESD77, Terms, definitions and letter symbols for discrete semiconductor devices",
    "jesd51": "JEDEC JESD51-2: junction-to-ambient resistance compares packages; it is an estimate in an enclosure",
    "ebers-moll": "J. J. Ebers, J. L. Moll, Large-signal behavior of junction transistors, Proc. IRE 42 (1954) 1761",
    "gummel-poon": "H. K. Gummel, H. C. Poon, An integral charge control model of bipolar transistors, "
    "Bell Syst. Tech. J. 49 (1970) 827",
    "gain cold": "Guaranteed cold and room gain pairs of MIL-PRF-19500 slash sheets: 75 at 25 °C with 35 at −55 °C "
    "gives the exponent 2.44; 2.5 is taken",
    "gain chord": "log hFE over log IC is concave in the integral charge-control model, so a chord lies below it "
    "(Gummel, Poon 1970); below the lowest point recombination leaves a slope of at most 1/2",
    "saturation hot": "Common practice, tightened: +0.7 %/K for the ohmic and the intrinsic part together",
    "vbe cold": "Common practice: −2.5 mV/K a junction where the larger magnitude is worse; "
    "dVBE/dT = (VBE − EG − XTI·VT)/T is −1.6 to −2.2 mV/K for 0.70 to 0.55 V",
    "vbe floor": "Common practice: no silicon junction conducts a tenth of its rated collector current below 0.60 V "
    "at 25 °C; moved over temperature by VBE(T) = VBE·T/T0 + EG·(1 − T/T0) − 3·VT·ln(T/T0)",
    "leakage growth": "Common practice, tightened: ×2 every 8 K up to 85 °C and every 10 K above",
    "leakage arrhenius": "A sum of thermally activated currents is convex in log I over 1/T, so a chord lies above it",
    "copper": "IEC 60028: resistance of annealed copper, R(T)/R20 = (234.5 + T)/254.5",
    "edge energy": "B. R. Gupta, V. Singhal, Power Electronics, ex. 1.7 (as transcribed): V·I·t/6 for a resistive edge; "
    "V·I·t/2 for a clamped inductive one",
    "charge control": "R. Beaufoy, J. J. Sparkes, The junction transistor as a charge-controlled device, "
    "ATE J. 13 (1957) 310",
    "derating line": "MIL-PRF-19500, paragraph 1.3 of the slash sheets: power falls on a line that ends at TJ max",
    "pulse heating": "Common practice: transient thermal resistance of a small part grows no faster than the square "
    "root of time and is complete after about a third of a second without a sink",
    "safe area": "Common practice: second breakdown is not to be feared below 30 V or half the power line",
    "driver base": "Common practice: base current up to a tenth of the rated collector current, or what the sheet tests",
    "divider bias": "D. A. Neamen, Electronic Circuit Analysis and Design, ex. 3.15: divider by Thévenin (as transcribed)",
    "stability factors": "D. A. Bell, Electronic Devices and Circuits, ex. 5.17 (as transcribed); the others are the "
    "derivatives of the same equation",
    "hybrid-pi": "L. J. Giacoletto, Study of p-n-p alloy junction transistors from d-c through medium frequencies, "
    "RCA Review 15 (1954) 506 (reference from memory)",
    "miller": "J. M. Miller, Dependence of the input impedance of a three-electrode vacuum tube upon the load in the "
    "plate circuit, Sci. Papers Bur. Stand. 15 (1920) 367 (reference from memory)",
    "load line": "A. Malvino, D. J. Bates, Electronic Principles, ex. 12-2: output compliance (as transcribed)",
    "class b": "A. S. Sedra, K. C. Smith, Microelectronic Circuits, ex. 14.1: worst loss at 2/π (as transcribed)",
    "transistor noise": "E. G. Nielsen, Behavior of noise figure in junction transistors, Proc. IRE 45 (1957) 957 "
    "(reference from memory)",
}
