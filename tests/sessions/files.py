"""Analyses from files: what is wrong is said at its line and column, and one composition reads the
same from every layout, delimiter, decimal sign and encoding.

The files are made here.  Expected figures are sums and quotients of what stands in them.
"""
import os
import statistics
import subprocess
import sys
import tempfile

import session

# A file, what stands behind its name, and: kind, place, a piece of the message or of its hint.
H = "component,mol%\n"
BAD = [
    # -- Cells (RFC 4180)
    ("never closed", 'component,mol%\n"CH4,60\nCO2,40\n', "",
     "csv-quote", "2:1", "never closed"),
    ("never closed, last cell", 'component,mol%\nCH4,60\nCO2,"40\n', "",
     "csv-quote", "3:5", "never closed"),
    ("text behind a closing mark", 'component,mol%\n"CH4"x,60\nCO2,40\n', "",
     "csv-quote", "2:6", "behind the closing"),
    ("a mark inside a cell", 'component,mol%\nCH4,6"0\nCO2,40\n', "",
     "csv-quote", "2:6", "inside a cell"),
    ("a mark inside, behind letters of two bytes",
     'component,mol%,remark\nCH4,60,µ°"x\nCO2,40,\n', "", "csv-quote", "2:10", "inside a cell"),
    ("a mark behind a cell of two lines", 'component,mol%,remark\nCH4,60,"a\nb"c\nCO2,40,\n', "",
     "csv-quote", "3:3", "behind the closing"),
    ("a carriage return alone", "component,mol%\rCH4,60\rCO2,40\n", "",
     "csv-quote", "1:15", "carriage return"),
    ("UTF-16, little end first", "\ufeffcomponent,mol%\nCH4,100\n".encode("utf-16-le"), "",
     "csv-encoding", "1:1", "UTF-16"),
    ("UTF-16, big end first", "\ufeffcomponent,mol%\nCH4,100\n".encode("utf-16-be"), "",
     "csv-encoding", "1:1", "UTF-8"),
    ("UTF-16 without a mark", "component,mol%\n".encode("utf-16-le"), "",
     "csv-encoding", "1:2", "UTF-16"),
    ("a null byte", b"component,mol%\nCH4,6\x000\n", "", "csv-encoding", "2:6", "null byte"),
    ("neither UTF-8 nor Windows-1252", b"component,mol%\nCH4,60\nCO2,40,\x81\n", "",
     "csv-encoding", "3:8", "neither"),
    ("marked as UTF-8, and not", b"\xef\xbb\xbfcomponent,mol%\nCH4,60,\xb5\n", "",
     "csv-encoding", "2:8", "marked as UTF-8"),
    ("nothing", "", "", "laboratory-layout", "1:1", "empty"),
    ("a mark and nothing", b"\xef\xbb\xbf", "", "laboratory-layout", "1:1", "empty"),
    ("one column", "CH4\n60\n", "", "csv-delimiter", "1:1", "no comma"),
    ("semicolons and commas, as often", "component;mol%,u\nCH4;60,a\nCO2;40,b\n", "",
     "csv-delimiter", "1:1", "a semicolon or a comma"),
    ("tabs and commas, as often", "component\tmol%,u\nCH4\t60,a\nCO2\t40,b\n", "",
     "csv-delimiter", "1:1", "a tab or a comma"),
    ("more cells than headings", "sample,CH4,CO2\nA,60,40,1\n", "mol%",
     "csv-width", "2:9", "4 cells, the headings are 3"),
    # -- What is in it
    ("no component", "a,b\n1,2\n", "mol%", "laboratory-layout", "1:1", "no component"),
    ("names without figures", "component,remark\nCH4,x\nCO2,y\n", "mol%",
     "laboratory-layout", "2:1", "no figures"),
    ("headings without rows", "sample,CH4,CO2\n", "mol%", "laboratory-layout", "1:8",
     "no figures"),
    ("remarks alone", "# CH4,60\n# CO2,40\n", "mol%", "csv-delimiter", "1:1", "no comma"),
    ("a sample without figures", "sample,CH4,CO2\nA,,n/a\n", "mol%",
     "laboratory-layout", "2:3", "no figures"),
    ("figures without a heading", "sample,CH4,CO2,\nA,60,39,1\n", "mol%",
     "laboratory-layout", "1:16", "no heading"),
    ("figures without a component", H + "CH4,60\n,39\nN2,1\n", "",
     "laboratory-name", "3:1", "no component"),
    ("an unknown name in a row", H + "CH4,60\nCO3x,39\nN2,1\n", "",
     "laboratory-name", "3:1", "no component is called 'CO3x'"),
    ("a misspelt name is offered", H + "CH4,60\ncarbon dioxyde,39\nN2,1\n", "",
     "laboratory-name", "3:1", "did you mean 'CO2'"),
    ("a misspelt name in the first row", H + "metane,60\nCO2,39\nN2,1\n", "",
     "laboratory-name", "2:1", "did you mean 'CH4'"),
    ("a misspelt name without headings", "metane,60\nCO2,39\nN2,1\n", "mol%",
     "laboratory-name", "1:1", "did you mean 'CH4'"),
    ("a misspelt name alone", "component;mol%\nMethan;58,2\n", "", "laboratory-name", "2:1",
     "did you mean 'CH4'"),
    ("an unknown heading of figures", "sample,CH4,CO2,Nx2\nA,60,39,1\n", "mol%",
     "laboratory-name", "1:16", "'Nx2'"),
    ("a name in a heading behind blanks", "sample,CH4,CO2,  Nx2\nA,60,39,1\n", "mol%",
     "laboratory-name", "1:18", "'Nx2'"),
    ("a name in quotes", 'sample,CH4,CO2,"Nx2"\nA,60,39,1\n', "mol%",
     "laboratory-name", "1:17", "'Nx2'"),
    ("a name of two meanings", H + "CH4,60\nxylene,39\nN2,1\n", "",
     "laboratory-name", "3:1", "more than one meaning"),
    ("a lump nobody defined", H + "CH4,60\nC6+,40\n", "",
     "laboratory-name", "3:5", "gas C6+ with molar mass"),
    ("a component twice", H + "CH4,60\nCO2,39\nCH4,1\n", "",
     "laboratory-twice", "4:1", "it stands at FILE:2:1"),
    ("a component twice, by two names", H + "methane,60\nCO2,39\nCH4,1\n", "",
     "laboratory-twice", "4:1", "CH4 is there twice"),
    ("a column twice", "sample,CH4,CO2,methane\nA,60,39,1\n", "mol%",
     "laboratory-twice", "1:16", "CH4"),
    ("uncertainties twice", "sample,CH4,u,u,CO2\nA,60,1,1,40\n", "mol%",
     "laboratory-twice", "1:14", "uncertainty of CH4"),
    ("uncertainties of nothing", "sample,u,CH4,CO2\nA,1,60,40\n", "mol%",
     "laboratory-layout", "1:8", "before these"),
    ("uncertainties of another", "sample,CH4,u(N2),CO2\nA,60,1,40\n", "mol%",
     "laboratory-layout", "1:12", "no column of N2"),
    ("uncertainties before figures", "component,u,mol%\nCH4,1,60\nCO2,1,40\n", "",
     "laboratory-layout", "1:11", "before these"),
    # -- Figures
    ("a word for a figure", H + "CH4,sixty\nCO2,39\n", "", "laboratory-amount", "2:5",
     "'sixty' is no amount of CH4"),
    ("a negative figure", H + "CH4,60\nCO2,-0.01\n", "", "laboratory-amount", "3:5",
     "not negative"),
    ("a minus of typesetters", H + "CH4,60\nCO2,−0.01\n", "", "laboratory-amount", "3:5",
     "not negative"),
    ("two points", H + "CH4,1.250.000\nCO2,40.5\n", "", "laboratory-amount", "2:5",
     "thousands marks"),
    ("digits in groups", H + "CH4,60\nH2S,1 250 ppm\n", "", "laboratory-amount", "3:5",
     "thousands marks"),
    ("digits in groups by apostrophes", H + "CH4,60\nH2S,1'250 ppm\n", "", "laboratory-amount",
     "3:5", "thousands marks"),
    ("beyond all numbers", H + "CH4,1e999\nCO2,40\n", "", "laboratory-amount", "2:5",
     "too large"),
    ("something behind a figure", H + "CH4,60 or so\nCO2,40\n", "", "laboratory-amount", "2:5",
     "no unit of an amount"),
    ("a unit of something else", H + "CH4,60 bar\nCO2,40\n", "", "laboratory-amount", "2:5",
     "no unit of an amount"),
    ("nothing behind the sign", H + "CH4,60 ±\nCO2,40\n", "", "laboratory-amount", "2:5",
     "missing behind the sign"),
    ("a limit that is uncertain", H + "CH4,60\nCO2,<1 ± 0.1\n", "", "laboratory-amount", "3:5",
     "below a limit"),
    ("a word for an uncertainty", "component,mol%,u\nCH4,60,much\nCO2,40,1\n", "",
     "laboratory-amount", "2:8", "'much' is no uncertainty"),
    ("a negative uncertainty", "component,mol%,u\nCH4,60,-1\nCO2,40,1\n", "",
     "laboratory-amount", "2:8", "not negative"),
    ("a limit for an uncertainty", "component,mol%,u\nCH4,60,<1\nCO2,40,1\n", "",
     "laboratory-amount", "2:8", "no uncertainty"),
    ("a point where commas are decimal", "component;mol%\nCH4;60,5\nCO2;39.5\n", "",
     "laboratory-decimal", "2:5", "'39.5' in line 3"),
    ("a point, and commas are said", "component;mol%\nCH4;60\nCO2;39.5\n", "decimal comma",
     "laboratory-amount", "3:5", "a point where"),
    ("a comma, and points are said", "component;mol%\nCH4;60\nCO2;39,5\n", "decimal point",
     "laboratory-amount", "3:5", "a comma where"),
    ("decimal comma or thousands", "component;mol%\nCH4;98\nH2S;1,250 ppm\n", "",
     "laboratory-decimal", "3:5", "decimal comma"),
    ("both signs in a figure", "component;ppm\nCH4;1.234,5\nCO2;2.000,1\n", "",
     "laboratory-amount", "2:5", "thousands marks"),
    # -- Units
    ("no unit", "component,amount\nCH4,60\nCO2,40\n", "", "laboratory-unit", "2:5", "mol%, mass%"),
    ("a bare per cent", "component,%\nCH4,60\nCO2,40\n", "", "laboratory-unit", "2:5",
     "per cent of amount, mass or volume"),
    ("per cent signs in the cells", "component,amount\nCH4,60 %\nCO2,40 %\n", "",
     "laboratory-unit", "2:5", "per cent of amount"),
    ("per cent where parts per million are said", "component,amount\nCH4,60 %\nCO2,40 %\n", "ppm",
     "laboratory-unit", "2:5", "where the unit is ppm"),
    ("another unit than is said", H + "CH4,60\nCO2,40\n", "mass%", "laboratory-unit", "1:1",
     "the file says mol%, the statement mass%"),
    ("a column of units with another word", "component,amount,unit\nCH4,60,mol%\nCO2,40,bar\n",
     "", "laboratory-unit", "3:8", "'bar'"),
    ("per cent of a unit that is none",
     "component,amount,unit\nCH4,60,mol%\nCO2,40,% ppm\n", "", "laboratory-unit", "3:8",
     "'% ppm'"),
    ("two units", "component,mol%,mass%\nCH4,60,40\nCO2,40,60\n", "", "laboratory-unit", "1:16",
     "mol% or those in mass%"),
    ("an uncertainty in another measure", "component,mol%,u [mass%]\nCH4,60,1\nCO2,40,1\n", "",
     "laboratory-unit", "2:8", "uncertainty in mass%"),
    ("mass per cubic metre of no state", "component,mol%\nCH4,60\nH2S,1200 mg/m3\n", "",
     "laboratory-unit", "3:5", "mg/Nm3"),
    # -- A component of a sample in each row
    ("of many samples none is said",
     "sample,component,mol%\nA,CH4,60\nA,CO2,40\nB,CH4,61\nB,CO2,39\n", "",
     "laboratory-sample", "2:1", '"A", "B"'),
    ("a row that names no sample",
     "sample,component,mol%\nA,CH4,60\n,CO2,40\nB,CH4,61\nB,CO2,39\n", 'sample "B"',
     "laboratory-sample", "3:1", "names none"),
    ("a figure of no component",
     "sample,component,mol%\nA,CH4,60\nA,,40\nB,CH4,61\nB,CO2,39\n", 'sample "B"',
     "laboratory-name", "3:3", "no component"),
    ("a misspelt name among samples",
     "sample,component,mol%\nA,CH4,60\nA,metane,40\nB,CH4,61\nB,CO2,39\n", 'sample "B"',
     "laboratory-name", "3:3", "did you mean 'CH4'"),
    ("a component twice in a sample",
     "sample,component,mol%\nA,CH4,60\nA,methane,40\nB,CH4,61\nB,CO2,39\n", 'sample "B"',
     "laboratory-twice", "3:3", "CH4 of A"),
    ("a component twice on one day",
     "date,component,mol%\n2026-11-02,CH4,60\n2026-11-02,CH4,61\n2026-11-03,CH4,60\n"
     "2026-11-03,CO2,40\n", 'sample "2026-11-03"', "laboratory-twice", "3:12", "FILE:2:16"),
    ("a unit nobody knows in one row",
     "sample,component,value,unit\nA,CH4,60,mol%\nA,CO2,40,bar\nB,CH4,61,mol%\nB,CO2,39,mol%\n",
     'sample "B"', "laboratory-unit", "3:10", "'bar'"),
    ("dry in one row, wet in another",
     "sample,component,value,unit,basis\nA,CH4,60,mol%,dry\nA,CO2,40,mol%,dry\n"
     "B,CH4,61,mol%,wet\nB,CO2,39,mol%,dry\n", 'sample "B"', "laboratory-moisture", "4:15",
     "dry is said in one place"),
    ("a basis that says neither",
     "sample,component,value,unit,basis\nA,CH4,60,mol%,dry\nA,CO2,40,mol%,moist\n"
     "B,CH4,61,mol%,dry\nB,CO2,39,mol%,dry\n", 'sample "B"', "laboratory-moisture", "3:15",
     "'moist' says neither"),
    ("no amount among samples",
     "sample,component,value,unit\nA,CH4,60,mol%\nA,CO2,forty,mol%\nB,CH4,61,mol%\n"
     "B,CO2,39,mol%\n", 'sample "A"', "laboratory-amount", "3:7", "'forty' is no amount of CO2"),
    ("an uncertainty that is none",
     "sample,component,mol%,u\nA,CH4,60,x\nA,CO2,40,\nB,CH4,61,\nB,CO2,39,\n", 'sample "A"',
     "laboratory-amount", "2:10", "'x' is no uncertainty"),
    ("two columns of figures",
     "sample,component,mol%,mass%\nA,CH4,60,40\nA,CO2,40,60\nB,CH4,61,40\nB,CO2,39,60\n",
     'sample "A"', "laboratory-unit", "1:23", "'mol%' and 'mass%'"),
    ("no column of figures",
     "sample,component,peak\nA,CH4,60\nA,CO2,40\nB,CH4,61\nB,CO2,39\n", 'sample "A" mol%',
     "laboratory-layout", "1:8", "no column is headed"),
    ("more cells than headings, in one row",
     "sample,component,mol%\nA,CH4,60\nA,CO2,40,7\nB,CH4,61\nB,CO2,39\n", 'sample "A"',
     "csv-width", "3:10", "4 cells, the headings are 3"),
    ("two decimal signs among samples",
     "sample;component;mol%\nA;CH4;60,5\nA;CO2;39.5\nB;CH4;61,5\nB;CO2;38,5\n", 'sample "A"',
     "laboratory-decimal", "2:7", "a point"),
    ("figures without a unit among samples",
     "sample,component,value\nA,CH4,60\nA,CO2,40\nB,CH4,61\nB,CO2,39\n", 'sample "A"',
     "laboratory-unit", "2:7", "mol%, mass% or vol%"),
    ("nothing but the rest", "component,mol%\nCH4,rest\nCO2,n/a\n", "", "laboratory-layout",
     "2:1", "no figures"),
    # -- Samples, moisture
    ("which sample", "sample,CH4,CO2\nA,60,40\nB,61,39\n", "mol%", "laboratory-sample", "2:1",
     '"A", "B"'),
    ("which sample, in columns", "component,A,B\nCH4,60,61\nCO2,40,39\n", "mol%",
     "laboratory-sample", "1:11", '"A", "B"'),
    ("no such sample", "sample,CH4,CO2\nA,60,40\nB,61,39\n", 'sample "C" mol%',
     "laboratory-sample", "2:1", 'none is called "C"'),
    ("two of one name", "sample,CH4,CO2\nA,60,40\nA,61,39\n", 'sample "A" mol%',
     "laboratory-sample", "3:1", "more than one"),
    ("two of one name and day", "sample,date,CH4,CO2\nA,02.11.,60,40\nA,02.11.,61,39\n",
     'sample "A, 02.11." mol%', "laboratory-sample", "3:1", "more than one"),
    ("two columns without names", "component,amount,result\nCH4,60,61\nCO2,40,39\n", "mol%",
     "laboratory-sample", "1:18", "neither has a sample's name"),
    ("dry or wet", "component,mol% dry,mol% wet\nCH4,60,58\nCO2,40,39\n", "",
     "laboratory-moisture", "1:20", "dry, or wet"),
    ("dry here, wet there", "sample,CH4 [mol% dry],CO2 [mol% wet]\nA,60,40\n", "",
     "laboratory-moisture", "1:23", "dry is said"),
    ("dry, said to be wet", "component,mol% dry\nCH4,60\nCO2,40\n", "wet",
     "laboratory-moisture", "1:1", "the file says dry"),
    ("water in dry gas", "component,mol% dry\nCH4,60\nCO2,39\nH2O,1\n", "",
     "laboratory-moisture", "4:5", "H2O has a figure"),
    ("water in gas said to be dry", "sample,CH4,CO2,H2O\nA,60,39,1\n", "mol% dry",
     "laboratory-moisture", "2:9", "H2O has a figure"),
]

# One composition in every form: CH4 60.5, CO2 38.25, N2 1.2 mol%, H2S 500 ppm; a total of 100.
WANT = {"CH4": 60.5, "CO2": 38.25, "N2": 1.2, "H2S": 0.05}
GOOD = [
    ("names and figures", "CH4,60.5\nCO2,38.25\nN2,1.2\nH2S,500 ppm\n", "mol%"),
    ("headings", "component,mol%\nCH4,60.5\nCO2,38.25\nN2,1.2\nH2S,0.05\n", ""),
    ("trade names", "gas,mol %\nmethane,60.5\nCarbon dioxide,38.25\nnitrogen,1.2\n"
     "hydrogen sulfide,0.05\n", ""),
    ("a unit in brackets", "component,result [mol-%]\nCH4,60.5\nCO2,38.25\nN2,1.2\nH2S,0.05\n",
     ""),
    ("units in a column", "component,amount,unit\nCH4,60.5,mol%\nCO2,38.25,mol%\nN2,1.2,mol%\n"
     "H2S,500,ppm\n", ""),
    ("per cent of moles and of volume", "component,amount,unit\nCH4,60.5,% mol/mol\n"
     "CO2,38.25,mol/mol %\nN2,1.2,% (v/v)\nH2S,500,ppm(v)\n", ""),
    ("units in a row", "sample,CH4,CO2,N2,H2S\n,mol%,mol%,mol%,ppm\nA,60.5,38.25,1.2,500\n", ""),
    ("units in a row, by components", "component,A\n,mol%\nCH4,60.5\nCO2,38.25\nN2,1.2\n"
     "H2S,0.05\n", ""),
    ("units in the headings", "CH4 [mol%],CO2 (mol%),N2 mol%,H2S/ppm\n60.5,38.25,1.2,500\n", ""),
    ("a unit above", "Larkmoor Works\nbasis,Mol%\nsample,CH4,CO2,N2,H2S\nA,60.5,38.25,1.2,0.05\n",
     ""),
    ("per cent signs", "component,amount\nCH4,60.5%\nCO2,38.25 %\nN2,1.2%\nH2S,0.05%\n", "mol%"),
    ("semicolons and decimal commas", "component;mol%\nCH4;60,5\nCO2;38,25\nN2;1,2\nH2S;0,05\n",
     ""),
    ("decimal commas in quotes", 'component,mol%\nCH4,"60,5"\nCO2,"38,25"\nN2,"1,2"\nH2S,"0,05"\n',
     ""),
    ("three decimals, and it is said", "component;mol%\nCH4;60,500\nCO2;38,250\nN2;1,200\n"
     "H2S;500 ppm\n", "decimal comma"),
    ("three decimals, told by a zero", "component;mol%\nCH4;60,500\nCO2;38,250\nN2;1,200\n"
     "H2S;0,050\n", ""),
    ("tabs", "component\tmol%\nCH4\t60.5\nCO2\t38.25\nN2\t1.2\nH2S\t0.05\n", ""),
    ("tabs and decimal commas", "component\tmol%\nCH4\t60,5\nCO2\t38,25\nN2\t1,2\nH2S\t0,05\n",
     ""),
    ("CRLF", "component,mol%\r\nCH4,60.5\r\nCO2,38.25\r\nN2,1.2\r\nH2S,0.05\r\n", ""),
    ("a byte-order mark", b"\xef\xbb\xbfcomponent,mol%\nCH4,60.5\nCO2,38.25\nN2,1.2\nH2S,0.05\n",
     ""),
    ("Windows-1252",
     b"component,mol%,remark\nCH4,60.5,\xb0\nCO2,38.25,\nN2,1.2,\nH2S,0.05,\n", ""),
    ("no line end at the end", "component,mol%\nCH4,60.5\nCO2,38.25\nN2,1.2\nH2S,0.05", ""),
    ("quotes, a line break in one", 'component,mol%,remark\n"CH4","60.5","a ""b"", c\nd"\n'
     'CO2,38.25,\nN2,1.2,\nH2S,0.05,\n', ""),
    ("remarks, empty lines, a total", "# of Monday\n\ncomponent,mol%\n# by GC\nCH4,60.5\n"
     "CO2,38.25\n\nN2,1.2\nH2S,0.05\nTotal,100\n,\n", ""),
    ("totals and other columns", "date,sample,operator,CH4,CO2,N2,H2S,Sum,remark\n"
     "2026-11-02,A,jm,60.5,38.25,1.2,0.05,100.00,new column\n", "mol%"),
    ("other rows", "Sample,A\nDate,2026-11-02\nOperator,jm\nCH4,60.5\nCO2,38.25\nN2,1.2\n"
     "H2S,0.05\nRemark,new column\n", "mol%"),
    ("means below samples", "sample,CH4,CO2,N2,H2S\nA,60.5,38.25,1.2,0.05\n"
     "Mean,60.5,38.25,1.2,0.05\n", "mol%"),
    ("a sample of many", "sample,CH4,CO2,N2,H2S\nA,1,2,3,4\nB,60.5,38.25,1.2,0.05\n",
     'sample "B" mol%'),
    ("a sample of many, in columns",
     "component,A,B\nCH4,1,60.5\nCO2,2,38.25\nN2,3,1.2\nH2S,4,0.05\n", 'sample "B" mol%'),
    ("samples numbered", "CH4,CO2,N2,H2S\n1,2,3,4\n60.5,38.25,1.2,0.05\n", 'sample "2" mol%'),
    ("samples by date", "date,CH4,CO2,N2,H2S\n2026-11-02,1,2,3,4\n"
     "2026-11-03,60.5,38.25,1.2,0.05\n", 'sample "2026-11-03" mol%'),
    ("samples by date and time", "date,time,CH4,CO2,N2,H2S\n02.11.,08:00,1,2,3,4\n"
     "02.11.,16:00,60.5,38.25,1.2,0.05\nMean,,30,20,2,2\n", 'sample "02.11., 16:00" mol%'),
    ("one sampling point, a row a day", "sample,date,CH4,CO2,N2,H2S\nT1,02.11.,1,2,3,4\n"
     "T1,03.11.,60.5,38.25,1.2,0.05\nT2,03.11.,1,2,3,4\n", 'sample "T1, 03.11." mol%'),
    ("of two units one is asked for", "component,mol%,ppm\nCH4,60.5,605000\nCO2,38.25,382500\n"
     "N2,1.2,12000\nH2S,0.05,500\n", "ppm"),
    ("of dry and wet one is asked for", "component,mol% dry,mol% wet\nCH4,60.5,1\nCO2,38.25,1\n"
     "N2,1.2,1\nH2S,0.05,1\n", "dry"),
    ("said dry, water not looked for", "component,mol% dry\nCH4,60.5\nCO2,38.25\nN2,1.2\n"
     "H2S,0.05\nH2O,n/a\n", ""),
    ("not looked for", "component,mol%\nCH4,60.5\nCO2,38.25\nN2,1.2\nH2S,0.05\nC3H8,n/a\nC2H6,-\n"
     "O2,\n", ""),
    ("an instrument's own table", "Component Name,Retention Time [min],Area,Mole %,Weight %\n"
     "Methane,1.2,12345,60.5,36\nCarbon dioxide,2.2,1234,38.25,62\nNitrogen,3.1,123,1.2,1\n"
     "Hydrogen sulfide,4.5,12,0.05,1\nTotal,,,100,100\n", "mol%"),
    ("peaks numbered, what burns beside them", "Peak,Component,Conc. [mol%],Btu/scf,GPM\n"
     "1,Methane,60.5,612.6,\n2,Carbon dioxide,38.25,,\n3,Nitrogen,1.2,,\n"
     "4,Hydrogen sulfide,0.05,0.3,0.01\n,Total,100,612.9,0.01\n", ""),
    ("peaks headed as peaks", "Peak,Amount [mol%],Area\nMethane,60.5,1\nCarbon dioxide,38.25,2\n"
     "Nitrogen,1.2,3\nHydrogen sulfide,0.05,4\n", ""),
    ("a sample named beside its components", "sample,component,mol%\nA,CH4,60.5\nA,CO2,38.25\n"
     "A,N2,1.2\nA,H2S,0.05\n", ""),
    ("a component of a sample in each row", "Sample ID;Analyte;Result;Unit\nB;CH4;1,5;mol-%\n"
     "A;methane;60,5;mol-%\nA;H2S;500;ppm\nB;CO2;98,5;mol-%\nA;Nitrogen;1,2;mol-%\n"
     "A;CO2;38,25;mol-%\n", 'sample "A"'),
    ("a component of a day in each row", "date,component,mol%\n2026-11-02,CH4,1\n"
     "2026-11-02,CO2,99\n2026-11-03,CH4,60.5\n2026-11-03,CO2,38.25\n2026-11-03,N2,1.2\n"
     "2026-11-03,H2S,500 ppm\n", 'sample "2026-11-03"'),
    ("one sampling point on two days", "sample,date,component,mol%\nT1,02.11.,CH4,1\n"
     "T1,02.11.,CO2,99\nT1,03.11.,CH4,60.5\nT1,03.11.,CO2,38.25\nT1,03.11.,N2,1.2\n"
     "T1,03.11.,H2S,0.05\n", 'sample "T1, 03.11."'),
    ("one sample, run twice", "sample,run,component,mol%\nT1,1,CH4,1\nT1,1,CO2,99\n"
     "T1,2,CH4,60.5\nT1,2,CO2,38.25\nT1,2,N2,1.2\nT1,2,H2S,0.05\n", 'sample "T1, 2"'),
    ("of two columns of figures one is asked for", "sample,component,mass%,ppm\nB,CH4,1,2\n"
     "A,CH4,3,605000\nA,CO2,4,382500\nA,N2,5,12000\nA,H2S,6,500\n", 'sample "A" ppm'),
    ("nitrogen as the rest",
     "component,mol%\nCH4,60.5\nCO2,38.25\nN2,balance\nH2S,0.05\n", ""),
    ("uncertainties beside",
     "component,mol%,u\nCH4,60.5,0.3\nCO2,38.25,\nN2,1.2,\nH2S,0.05,\n", ""),
    ("uncertainties by place", "CH4,60.5,0.3\nCO2,38.25,0.2\nN2,1.2,\nH2S,0.05,\n", "mol%"),
]

# Standard uncertainty of CH4 in a gas of CH4 60, CO2 rest 40 when CH4 alone moves by u and the list
# is scaled again: the share is x/(x + 40), its derivative 40/100^2 per mol% of 100.
SPREADS = [
    ("standard", "component,mol%,u\nCH4,60,0.5\nCO2,40,\n", "", 0.5),
    ("expanded, k said", "component,mol%,U (k=2)\nCH4,60,1\nCO2,40,\n", "", 0.5),
    ("expanded, k not said", "component,mol%,U\nCH4,60,1\nCO2,40,\n", "", 0.5),
    ("expanded, k of 3", "component,mol%,U (k=3)\nCH4,60,1.5\nCO2,40,\n", "", 0.5),
    ("expanded, for 95 %", "component,mol%,U95\nCH4,60,1\nCO2,40,\n", "", 0.5),
    ("per cent of the figure", "component,mol%,u %\nCH4,60,1\nCO2,40,\n", "", 0.6),
    ("relative, by its word", "component,mol%,u rel. [%]\nCH4,60,1\nCO2,40,\n", "", 0.6),
    ("a per cent sign in the cell", "component,mol%,u\nCH4,60,1 %\nCO2,40,\n", "", 0.6),
    ("in the cell of the figure", "component,mol%\nCH4,60 ± 0.5\nCO2,40\n", "", 0.5),
    ("in the cell, in ASCII", "component,mol%\nCH4,60 +/- 0.5\nCO2,40\n", "", 0.5),
    ("in a column of its component", "sample,CH4,CO2,u(CH4)\nA,60,40,0.5\n", "mol%", 0.5),
    ("in a column by its name", "sample,CH4,u CH4 [mol%],CO2\nA,60,0.5,40\n", "mol%", 0.5),
    ("in the next column", "sample,CH4 [mol%],U (k=2),CO2 [mol%]\nA,60,1,40\n", "", 0.5),
    ("in another unit", "component,mol%,u [ppm]\nCH4,60,5000\nCO2,40,\n", "", 0.5),
    ("with decimal commas", "component;mol%;u\nCH4;60,0;0,5\nCO2;40,0;\n", "", 0.5),
    ("of a limit none", "component,mol%,u\nCH4,60,\nCO2,40,\nO2,<0,0.5\n", "", None),
]

# A component of a sample in each row; the same uncertainties, and units that differ.
LONG = ("sample,component,value,unit,%s\nB,CH4,70,mol%%,\nA,CH4,%s\nB,CO2,30,mol%%,\n"
        "A,CO2,40,mol%%,\n")
SPREADS += [
    ("of a sample among others", LONG % ("u", "60,mol%,0.5"), 'sample "A"', 0.5),
    ("of a sample, expanded", LONG % ("U (k=2)", "60,mol%,1"), 'sample "A"', 0.5),
    ("of a sample, in its figure's unit", LONG % ("u", "600000,ppm,5000"), 'sample "A"', 0.5),
    ("of a sample, in the cell", LONG % ("remark", "600000 ± 5000,ppm,"), 'sample "A"', 0.5),
]

# What has to be said of a file: name, file, words, piece of a note.
SAID = [
    ("what a chromatograph prints beside its shares", "Name,RT,Area,Height,Amount\n"
     "Methane,1.2,10302,411,60\nCarbon Dioxide,2.3,5021,230,40\nTotal,,,,100\n", "mol%",
     "not read: column 'RT', column 'Area', column 'Height', line 4 (Total)"),
    ("what stands above is told from above", "Instrument,GC-7\nOperator,KL\nDate,2026-03-02\n"
     "Component,Result,Unit\nCH4,60,mol%\nCO2,40,mol%\n", "", "not read: line 1, line 2, line 3"),
    ("layout", "sample;CH4;CO2\nA;60;40\nB;61;39\n", 'sample "B" mol%',
     "a sample in each row, 2 samples, 2 components"),
    ("a component of a sample in each row", "sample,component,mol%,operator\nA,CH4,60,jm\n"
     "A,CO2,40,jm\nA,Total,100,\nsample,component,mol%,operator\nB,CH4,61,jm\nB,CO2,39,\n",
     'sample "B"', "a component of a sample in each row, 2 samples, 2 components"),
    ("what a long table passes over", "sample,component,mol%,operator\nA,CH4,60,jm\n"
     "A,CO2,40,jm\nA,Total,100,\nsample,component,mol%,operator\nB,CH4,61,jm\nB,CO2,39,\n",
     'sample "B"', "not read: column 'operator', line 4 (Total), line 5 (component)"),
    ("what a sample of a long table lacks", "sample,component,mol%\nA,CH4,60\nA,CO2,39.5\n"
     "A,O2,0.5\nB,CH4,61\nB,CO2,39\n", 'sample "B"', "left out: O2"),
    ("delimiter and sign", "sample;CH4;CO2\nA;60,5;39,5\n", "mol%",
     "cells parted by ';', decimal sign ',', UTF-8"),
    ("typed unit", "component,amount\nCH4,60\nCO2,40\n", "mol%", "figures in mol%, as typed"),
    ("passed columns", "sample,CH4,CO2,operator\nA,60,40,jm\n", "mol%", "column 'operator'"),
    ("passed total", "component,mol%\nCH4,60\nCO2,40\nTotal,100\n", "", "line 4 (Total)"),
    ("expanded without k", "component,mol%,U\nCH4,60,1\nCO2,40,\n", "", "k = 2"),
    ("Windows-1252", b"component,mol%,remark\nCH4,60,\xb0\nCO2,40,\n", "", "Windows-1252"),
    ("not detected", "component,mol%\nCH4,60\nCO2,40\nH2S,ND\n", "", "counted as zero: H2S"),
    ("a trace", "component,mol%\nCH4,60\nCO2,40\nCO,trace\n", "", "counted as zero: CO"),
    ("left out", "component,mol%\nCH4,60\nCO2,40\nO2,n/a\n", "", "left out: O2"),
    ("a limit", "component,mol%\nCH4,60\nCO2,39.99\nO2,<0.02\n", "", "half the limit"),
]


def write(name, content):
    with open(name, "wb") as file:
        file.write(content if isinstance(content, bytes) else content.encode())


def said_of(things):
    return " | ".join(line for thing in things for key in ("taken", "notes", "cautions")
                      for line in thing.get(key, []))


def bad_files(tap):
    for i, (name, content, words, kind, place, piece) in enumerate(BAD):
        file = "bad%d.csv" % i
        write(file, content)
        things = session.answers('gas kept = CH4 60, CO2 40 mol%%\ngas lab from "%s" %s\nlist'
                                 % (file, words))
        error = next((thing["error"] for thing in things if "error" in thing), {})
        told = error.get("message", "") + " " + (error.get("hint") or "")
        wrong = []
        if error.get("kind") != kind:
            wrong.append("kind %s, not %s" % (error.get("kind"), kind))
        if not told.startswith("%s:%s: " % (file, place)):
            wrong.append("not at %s" % place)
        if piece.replace("FILE", file) not in told:
            wrong.append("does not say %r" % piece)
        if (error.get("line"), error.get("column")) != (2, 14):
            wrong.append("not where the file is named")
        if "lab" in str(things[-1].get("card", {}).get("rows", "")):
            wrong.append("lab was defined")
        tap.tell(wrong and wrong + [told], "refused: " + name)


def good_files(tap, locale=None):
    for i, (name, content, words) in enumerate(GOOD):
        file = "good%d.csv" % i
        write(file, content)
        status, out, err = session.run('gas lab from "%s" %s\nlab in mol%%' % (file, words),
                                       locale=locale)
        things = [session.json.loads(line) for line in out.splitlines()]
        wrong = session.faults(things)
        got = {a["what"].split(" ")[0]: a["value"] for thing in things
               for a in thing.get("answers", [])}
        if set(got) != set(WANT):
            wrong.append("parts %s" % sorted(got))
        else:
            wrong += [line for key in WANT
                      for line in [session.off(got[key], WANT[key], 1e-12)] if line]
        tap.tell(wrong, "read: %s%s" % (name, " in a German locale" if locale else ""))


def spreads(tap):
    for i, (name, content, words, u) in enumerate(SPREADS):
        file = "spread%d.csv" % i
        write(file, content)
        things = session.answers('gas lab from "%s" %s\nCH4 of lab in mol%%' % (file, words))
        wrong = session.faults(things)
        answer = things[-1].get("answers", [{}])[0]
        if u is None:
            wrong += ["an uncertainty"] if "uncertainty" in answer else []
        else:
            # By finite differences: (f(60 + u) - f(60 - u))/2 with f(x) = 100 x/(x + 40).
            want = (100 * (60 + u) / (100 + u) - 100 * (60 - u) / (100 - u)) / 2
            wrong += [line for line in [session.off(answer.get("uncertainty"), want, 1e-9)] if line]
        tap.tell(wrong, "uncertainty: " + name)


def said(tap):
    for i, (name, content, words, piece) in enumerate(SAID):
        file = "said%d.csv" % i
        write(file, content)
        things = session.answers('gas lab from "%s" %s\nCH4 of lab in mol%%' % (file, words))
        told = said_of(things)
        tap.tell([] if piece in told else [told or str(things)], "said: " + name)


# Practice: name, file, words behind it, questions with answer, tolerance and uncertainty.  Worked
# by hand from the definitions: x_i = (w_i/M_i)/sum (w_j/M_j) (ISO 14912:2003) with molar masses of
# CIAAW 2021; u(N2)^2 = sum u_i^2, u(M)^2 = sum ((M_i - M_N2) u_i)^2 for nitrogen as the rest.
PRACTICE = [
    ("a certificate in weight per cent", "component,weight %\npropane,91.5\npropene,2.5\n"
     "n-butane,6.0\n", "",
     [("C3H8 of lab in mol%", 92.7317, 3e-5, None), ("C3H6 of lab in mol%", 2.65503, 3e-5, None),
      ("nC4H10 of lab in mol%", 4.61330, 3e-5, None),
      ("molar mass of lab in g/mol", 44.6906, 3e-5, None),
      ("density of lab at normal, ideal in kg/m3", 1.99387, 3e-5, None)]),
    ("a syngas scaled", "component,mol%\nH2,41.20\nCO,23.85\nCO2,19.60\nCH4,8.42\nN2,6.30\n",
     "normalised",
     [("H2 of lab in mol%", 41.4612, 1e-5, None), ("CO of lab in mol%", 24.0012, 1e-5, None),
      ("N2 of lab in mol%", 6.33994, 1e-5, None),
      ("molar mass of lab in g/mol", 19.3745, 3e-5, None)]),
    ("a syngas with nitrogen as balance",
     "component,mol%\nH2,41.20\nCO,23.85\nCO2,19.60\nCH4,8.42\nN2,6.30\n",
     "normalised into N2",
     [("N2 of lab in mol%", 6.93, 1e-5, None),
      ("molar mass of lab in g/mol", 19.4289, 3e-5, None)]),
    ("nitrogen by difference", "component,mol%,u\nCH4,62.10,0.30\nCO2,33.40,0.25\nO2,0.55,0.05\n"
     "H2S,0.12,0.01\nN2,by difference,\n", "",
     [("N2 of lab in mol%", 3.83, 1e-5, 0.39383),
      ("molar mass of lab in g/mol", 25.9515, 3e-5, 0.053787)]),
]


def practice(tap):
    for i, (name, content, words, asked) in enumerate(PRACTICE):
        file = "practice%d.csv" % i
        write(file, content)
        things = session.answers("\n".join(['gas lab from "%s" %s' % (file, words)]
                                           + [question for question, *_ in asked]))
        wrong = session.faults(things)
        answers = [a for thing in things for a in thing.get("answers", [])]
        if len(answers) != len(asked):
            wrong.append("%d answers" % len(answers))
        for answer, (question, value, tolerance, u) in zip(answers, asked):
            lines = [session.off(answer["value"], value, tolerance)]
            if u is not None:
                lines.append(session.off(answer.get("uncertainty"), u, 5e-3))
            wrong += ["%s: %s" % (question, line) for line in lines if line]
        tap.tell(wrong, "practice: " + name)


def life(tap):
    """Saved, opened, changed, gone; closed, redefined and taken back like any other gas."""
    write("life.csv", "component,mol%\nCH4,60\nCO2,39\n")
    things = session.answers('gas lab from "life.csv"\nCH4 of lab in mol%\nnormalise lab\n'
                             'CH4 of lab in mol%\nundo\nCH4 of lab in mol%\n'
                             'gas a from "life.csv" normalised into N2\nN2 of a in mol%\n'
                             'gas b = a without CO2 normalised\nCH4 of b in mol%\n'
                             'save "life.gw"')
    kinds = [thing["error"]["kind"] for thing in things if "error" in thing]
    tap.tell([] if kinds == ["gas-open", "gas-open"] else [str(kinds)],
             "an open gas from a file is refused until it is closed, and again after undo")
    got = [a["value"] for thing in things for a in thing.get("answers", [])]
    want = [100 * 60 / 99, 1, 100 * 60 / 61]
    tap.tell([line for g, w in zip(got, want) for line in [session.off(g, w, 1e-12)] if line]
             or ([] if len(got) == 3 else [str(got)]),
             "closed by scaling, into N2, and without CO2")
    kept = open("life.gw", encoding="utf-8").read()
    tap.tell([] if 'gas a from "life.csv" normalised into N2\n' in kept else [kept],
             "a saved session has the statement with the path as typed")
    write("life.csv", "component,mol%\nCH4,70\nCO2,29\n")
    things = session.answers('open "life.gw"\nN2 of a in mol%\nCH4 of a in mol%')
    tap.tell([line for line in [session.off(things[-1]["answers"][0]["value"], 70, 1e-12)] if line],
             "an opened session reads the file again")
    os.rename("life.csv", "gone.csv")
    things = session.answers('open "life.gw"')
    message = things[-1].get("error", {})
    tap.tell([] if message.get("kind") == "file" and "life.csv" in message["message"]
             and "line" in message["hint"] else [str(things)],
             "a file that is gone is named when the session is opened")
    os.rename("gone.csv", "life.csv")


def changes(tap):
    """A file that is written anew, or goes away, while the session is open."""
    write("live.csv", "component,mol%\nCH4,60\nCO2,40\n")
    with subprocess.Popen([session.program(), "--format", "json"], stdin=subprocess.PIPE,
                          stdout=subprocess.PIPE, bufsize=0) as program:
        def ask(line):
            program.stdin.write(line.encode() + b"\n")
            return session.json.loads(program.stdout.readline())

        program.stdin.write(b'gas lab from "live.csv"\ngas b = lab without CO2 normalised\n')
        before = ask("CH4 of lab in mol%")
        write("live.csv", "component,mol%\nCH4,70.5\nCO2,29.5\n")
        after = ask("CH4 of lab in mol%")
        derived = ask("CH4 of b in mol%")
        program.stdin.write(b'gas lab from "live.csv"\n')
        again = ask("CH4 of lab in mol%")
        os.remove("live.csv")
        gone = ask("CH4 of lab in mol%")
    values = [thing["answers"][0]["value"] for thing in (before, after, again, gone)]
    tap.tell([] if [round(v, 9) for v in values] == [60, 60, 70.5, 70.5] else [str(values)],
             "a gas keeps the figures that were read, until its statement is said again")
    said = [any("has changed" in note for note in thing["notes"])
            for thing in (before, after, derived, again)]
    tap.tell([] if said == [False, True, True, False] else [str(said)],
             "that a file has changed is said under what rests on it")
    tap.tell([] if any("no longer there" in note for note in gone["notes"]) else [str(gone)],
             "that a file is gone is said")


# ISO 5725-2:1994, table 5: critical values of Grubbs' test, 5 % and 1 % (from memory).
GRUBBS = {5: (1.715, 1.764), 6: (1.887, 1.973), 7: (2.020, 2.139)}


def trend_of(things):
    return next((thing["trend"] for thing in things if "trend" in thing), {})


def compare(trend, values, outliers=()):
    """What is wrong with a trend of VALUES (by name; None: no figure)."""
    rows = {row["name"]: row for row in trend.get("rows", [])}
    wrong = [] if list(rows) == list(values) else ["rows %s" % list(rows)]
    for name, value in values.items():
        row = rows.get(name, {})
        if value is None:
            wrong += [] if row.get("value", 0) is None and row.get("why") else [str(row)]
        else:
            line = session.off(row.get("value"), value, 1e-9)
            wrong += [name + ": " + line] if line else []
        standing = "outlier" if name in outliers else "usual"
        wrong += [] if row.get("standing") == standing else ["%s: %s" % (name, row.get("standing"))]
    groups = [("all", [v for v in values.values() if v is not None])]
    if outliers:
        groups.append(("without_outliers", [v for n, v in values.items()
                                            if v is not None and n not in outliers]))
    for key, group in groups:
        got = trend.get(key, {})
        want = {"count": len(group), "mean": statistics.mean(group),
                "standard_deviation": statistics.stdev(group),
                "median": statistics.median(group), "least": min(group), "greatest": max(group)}
        wrong += ["%s %s: %s" % (key, name, line) for name, value in want.items()
                  for line in [session.off(got.get(name), value, 1e-9)] if line]
        if key == "all" and len(group) >= 5:
            middle = statistics.median(group)
            spread = statistics.median(abs(v - middle) for v in group) / 0.6744897501960817
            line = session.off(got.get("robust_deviation"), spread, 1e-9)
            wrong += ["robust deviation: " + line] if line else []
            far = sum(abs(v - middle) > 3 * spread for v in group)
            got = trend.get("hampel", {}).get("beyond")
            wrong += [] if got == far else ["hampel %s, not %d" % (got, far)]
        elif key == "all":
            wrong += [] if "hampel" not in trend else ["an identifier of too few"]
        if len(group) in GRUBBS and key == groups[-1][0]:
            test = trend.get("grubbs", {})
            for name, value in zip(("straggler_above", "outlier_above"), GRUBBS[len(group)]):
                line = session.off(test.get(name), value, 6e-4, "abs")
                wrong += [name + ": " + line] if line else []
            far = max(abs(v - statistics.mean(group)) for v in group) / statistics.stdev(group)
            line = session.off(test.get("G"), far, 1e-9)
            wrong += ["G: " + line] if line else []
    return wrong


def trends(tap):
    """Whole files and sets of gases.  CH4 of a scaled list is its share of the total."""
    lists = {"A": (60, 39.5), "B": (61, 38.7), "C": (59.5, 40.2), "D": (60.4, 39.1),
             "E": (50, 49.6), "F": (60.2, 39.3)}
    text = "sample,CH4,CO2,H2S [ppm]\n" + "".join("%s,%r,%r,%s\n" % (
        name, ch4, co2, "n/a" if name == "C" else "<5" if name == "B" else "10")
        for name, (ch4, co2) in lists.items())
    write("set.csv", text)
    ppm = {name: {"C": 0, "B": 2.5e-4}.get(name, 1e-3) for name in lists}
    share = {name: 100 * ch4 / (ch4 + co2 + ppm[name]) for name, (ch4, co2) in lists.items()}
    gas = 'gas lab from "set.csv" sample "A" mol% normalised\n'
    tap.tell(compare(trend_of(session.answers(gas + "trend CH4 of lab in mol%")), share, ["E"]),
             "a trend over the samples of a file, with its outlier")
    flow = {name: value / 100 * 10 for name, value in share.items()}
    tap.tell(compare(trend_of(session.answers(
        gas + "stream f = 10 kmol/h of lab\ntrend CH4 of f in kmol/h")), flow, ["E"]),
             "a trend of a stream of that gas")
    found = trend_of(session.answers(gas + "trend H2S of lab in ppm"))
    h2s = {name: (None if name == "C" else ppm[name] / (ch4 + co2 + ppm[name]) * 1e6)
           for name, (ch4, co2) in lists.items()}
    wrong = [line for row in found.get("rows", []) if h2s[row["name"]] is not None
             for line in [session.off(row["value"], h2s[row["name"]], 1e-9)] if line]
    wrong += [] if {row["name"] for row in found.get("rows", []) if row["value"] is None} == {"C"} \
        else ["what was not looked for counts"]
    wrong += [] if found.get("all", {}).get("count") == 5 else ["count"]
    tap.tell(wrong, "what was not looked for is no zero in a trend")
    tap.tell([] if "H2S below 5 ppm" in said_of(session.answers(gas + "trend CH4 of lab in mol%"))
             else ["not said"], "a limit in one of the samples is said")
    typed = "".join("gas raw%d = CH4 %r, CO2 %r mol%%\n" % (i, *lists[name])
                    for i, name in enumerate("ABCDF"))
    want = {"raw%d" % i: 100 * lists[name][0] / sum(lists[name]) for i, name in enumerate("ABCDF")}
    tap.tell(compare(trend_of(session.answers(
        typed + "trend CH4 of raw0 in mol% with raw*")), want),
             "a trend over gases whose names begin so")
    tap.tell(compare(trend_of(session.answers(
        typed + "trend CH4 of raw3 in mol% with raw0, raw1, raw2, raw3, raw4")), want),
             "a trend over gases by name, asked of another of them")
    tap.tell(compare(trend_of(session.answers(
        typed + "trend CH4 of raw0 in mol% with raw0, raw1, raw2, raw3")),
        {name: want[name] for name in list(want)[:4]}), "a trend over few gases has no identifier")
    two = {"raw%d" % i: v for i, v in enumerate((60, 60.2, 59.9, 60.1, 60.3, 50, 50.1))}
    found = trend_of(session.answers(
        "".join("gas %s = CH4 %r, CO2 rest mol%%\n" % pair for pair in two.items())
        + "trend CH4 of raw0 in mol% with raw*"))
    wrong = compare(found, two)             # two hide one another from Grubbs' test
    wrong += [] if found.get("hampel", {}).get("beyond") == 2 else [str(found.get("hampel"))]
    tap.tell(wrong, "two outliers that hide one another are far from the median")
    write("u.csv", "sample,CH4,u,CO2\nA,60,0.5,40\nB,60,0.2,40\n")
    rows = trend_of(session.answers('gas lab from "u.csv" sample "A" mol%\n'
                                    "trend CH4 of lab in mol%")).get("rows", [{}, {}])
    wrong = []
    for row, u in zip(rows, (0.5, 0.2)):
        want = (100 * (60 + u) / (100 + u) - 100 * (60 - u) / (100 - u)) / 2
        wrong += [line for line in [session.off(row.get("uncertainty"), want, 1e-9)] if line]
    tap.tell(wrong, "each sample of a trend has its own uncertainty")
    kinds = [(thing["error"]["kind"], thing["error"]["column"]) for thing in session.answers(
        'gas lab from "set.csv" sample "A" mol% normalised\ngas b from "u.csv" sample "A" mol%\n'
        "gas typed = CH4 60, CO2 40 mol%\ntrend CH4 of typed in mol%\n"
        "trend CH4 of typed in mol% with nobody*\ntrend CH4 of typed in mol% with lab, b\n"
        "trend lab in mol%\ntrend CH4 of nobody with typed\nshow samples of typed\n"
        "show samples of nobody\nshow samples of \"gone.csv\"") if "error" in thing]
    want = [("kind-wrong", 7), ("name-unknown", 33), ("kind-wrong", 7), ("kind-wrong", 7),
            ("kind-wrong", 7), ("kind-wrong", 17), ("name-unknown", 17), ("file", 17)]
    tap.tell([] if kinds == want else [str(kinds)], "trends of nothing are refused")
    card = next((thing["card"] for thing in session.answers(
        'show samples of "set.csv" mol% normalised') if "card" in thing), {})
    rows = {row["name"]: dict(zip(card["columns"], row["values"])) for row in card.get("rows", [])}
    wrong = [line for name in lists for line in [
        session.off(rows[name]["CH4"], share[name], 1e-9),
        session.off(rows[name]["total"], sum(lists[name]) + ppm[name], 1e-9)] if line]
    wrong += [line for line in [session.off(rows["mean"]["CH4"], statistics.mean(share.values()),
                                            1e-9),
                                session.off(rows["s"]["CH4"], statistics.stdev(share.values()),
                                            1e-9)] if line]
    tap.tell(wrong, "all samples of a file in one table")
    answers = session.answers('gas lab from "set.csv" sample "D" mol% normalised\nwobbe of lab in '
                              "MJ/m3\ngross calorific value of lab in MJ/m3")
    got = [a["value"] for thing in answers for a in thing.get("answers", [])]
    tap.tell([line for name, value in zip(("wobbe", "gross"), got)
              for line in [session.off(rows["D"][name], value, 1e-12)] if line],
             "the table's calorific values are those of a question")
    write("open.csv", "sample,CH4,CO2\nA,60,39.5\nB,60,39\nC,61,39\n")
    things = session.answers('show samples of "open.csv" mol%\n')
    rows = {row["name"]: row["values"] for row in things[0]["card"]["rows"]}
    tap.tell([] if rows["B"] == [99, 60, 39, "open", None] and "open" not in rows["A"]
             and abs(rows["mean"][0] - 99.75) < 1e-9 else [str(rows)],
             "an open sample stands in the table as stated, and in no mean")
    things = session.answers('show samples of "open.csv" mass%\n')
    rows = {row["name"]: row["values"] for row in things[0]["card"]["rows"]}
    tap.tell([] if rows["B"][3] == "open" and abs(rows["B"][1] - 60) < 1e-9
             and abs(rows["B"][0] - 99) < 1e-9 else [str(rows)],
             "an open sample stated by mass stands as stated")
    rows = trend_of(session.answers('gas lab from "open.csv" sample "A" mol%\n'
                                    "trend CH4 of lab in mol%")).get("rows", [])
    tap.tell([] if [row["value"] is None for row in rows] == [False, True, False]
             and "99 mol%" in rows[1]["why"] else [str(rows)],
             "an open sample has no figure in a trend, and it is said why")


def main():
    tap = session.Tap()
    with tempfile.TemporaryDirectory() as folder:
        os.environ["GASWRIGHT"] = session.program()
        os.chdir(folder)
        bad_files(tap)
        good_files(tap)
        good_files(tap, "de_DE.UTF-8")
        spreads(tap)
        said(tap)
        practice(tap)
        life(tap)
        changes(tap)
        trends(tap)
        os.chdir("/")
    return tap.finish()


if __name__ == "__main__":
    sys.exit(main())
