"""The invented parts of the demo: what make_parts.py works out the ratings from.

One line a part: part, maker, package, polarity, V_DS,max in V, die area in mm2, die kind, flags.
Die kinds: trench (least on-resistance, early hot spots), planar (late hot spots), linear (made for
linear mode). Nothing here is a real maker, a real part or a real package.

Flags, what the sheet gives:   cell     SOA and Zth in the parts table, else in the curve files
                               foster   Foster pairs instead of Zth points
                               hot      a second SOA family at 75 degC
                               flank    SOA points along the Rds(on) line
                               1s       a curve for 1 s
                               neg      P-channel ratings with their signs
Flags, what the sheet lacks:   no_soa, no_zth, no_low_gate, no_dc, no_crss, no_eas, no_rth_ja,
                               short_soa (curves end at 40 V)
Flags, what contradicts:       high_soa (1.3 times what Zth allows), zth_end (last Zth 10 % off
                               rth_jc), touch (the 10 ms curve meets the 1 ms curve at its end)
"""

PARTS = """
NVK025N09    Norrvik   LFP8  N  25 12   trench cell
NVK030N13    Norrvik   LFP8  N  30 9    trench cell
NVK040N12    Norrvik   LFP8  N  40 13   trench foster
NVK060N22    Norrvik   LFP8  N  60 12   trench cell touch
NVK080N35    Norrvik   LFP8  N  80 13   trench
NVK100N38    Norrvik   LFP8  N 100 14   trench cell zth_end
NVK100N19    Norrvik   TOX8  N 100 30   trench foster
NVK040P95    Norrvik   LFP8  P  40 9    trench cell neg
NVK060P11    Norrvik   LFP8  P  60 14   trench no_dc neg
TS-L80-24    Tessaro   TOX8  N  80 30   linear hot
TS-L100-30   Tessaro   TOX8  N 100 32   linear 1s flank
TS-L100-75   Tessaro   DQK7  N 100 16   linear cell 1s
TS-L150-60   Tessaro   TOX8  N 150 34   linear no_low_gate
TS-L25-12    Tessaro   LFP8  N  25 14   linear cell
TS-L40-20    Tessaro   LFP8  N  40 13   linear flank
TS-LP60-14   Tessaro   DQK7  P  60 26   linear cell neg 1s
TS-LP40-9    Tessaro   DQK7  P  40 24   linear hot neg
KB30A8       Kilnbeck  DPK3  N  30 6    planar cell no_eas
KB40A10      Kilnbeck  DPK3  N  40 8    planar cell flank
KB60A14      Kilnbeck  DPK3  N  60 10   planar no_rth_ja
KB80A12      Kilnbeck  DQK7  N  80 22   planar cell 1s
KB100A18     Kilnbeck  DQK7  N 100 24   planar cell
KB100A40     Kilnbeck  DPK3  N 100 9    planar foster no_low_gate
KB200A65     Kilnbeck  THT3  N 200 30   planar cell no_low_gate
KB60PA30     Kilnbeck  DPK3  P  60 10   planar cell
KB100PA45    Kilnbeck  DQK7  P 100 24   planar cell flank no_crss
KB30PA20     Kilnbeck  DPK3  P  30 8    planar neg
UB3025LF     Umbrient  MLF33 N  30 4.5  trench cell no_crss
UB3014LF     Umbrient  MLF33 N  30 6    trench no_zth
UB4016LF     Umbrient  LFP8  N  40 11   trench cell high_soa
UB6030LF     Umbrient  MLF33 N  60 6    trench no_soa
UB8055LF     Umbrient  LFP8  N  80 9    trench cell no_dc
UB10042LF    Umbrient  LFP8  N 100 13   trench short_soa
UB15090LF    Umbrient  LFP8  N 150 14   trench foster high_soa
UB4020PF     Umbrient  LFP8  P  40 7    trench flank
UB3022PF     Umbrient  MLF33 P  30 6    trench cell no_eas neg
HV25N1L      Halvessa  LFP8  N  25 10   trench foster no_rth_ja
HV60N2T      Halvessa  TOX8  N  60 26   trench cell no_dc
HV80N2T      Halvessa  TOX8  N  80 28   trench foster
HV100N3T     Halvessa  TOX8  N 100 26   trench cell no_zth
HV200N13T    Halvessa  TOX8  N 200 32   trench
HV60P16D     Halvessa  DQK7  P  60 18   planar foster no_low_gate
HV80P28D     Halvessa  DQK7  P  80 20   planar no_soa neg
HV40P13D     Halvessa  DPK3  P  40 12   planar foster zth_end no_rth_ja
"""
