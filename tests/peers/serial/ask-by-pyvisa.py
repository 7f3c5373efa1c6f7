"""Asks an instrument on a serial port through PyVISA and prints the answers as JSON, one object.

Usage: ask-by-pyvisa.py PORT BAUD QUERY...
What does not end in a question mark is sent without waiting for an answer.
"""
import json
import sys

import pyvisa

port, baud, *queries = sys.argv[1:]
manager = pyvisa.ResourceManager("@py")
instrument = manager.open_resource(
    f"ASRL{port}::INSTR", baud_rate=int(baud), read_termination="\n", write_termination="\n", timeout=5000
)
answers = []
for query in queries:
    if query.endswith("?"):
        answers.append(instrument.query(query))
    else:
        instrument.write(query)
print(json.dumps(answers))
instrument.close()
