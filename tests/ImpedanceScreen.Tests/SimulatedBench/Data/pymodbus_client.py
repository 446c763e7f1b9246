"""Drives the relay unit 7 of a simulated bench with pymodbus (Debian: python3-pymodbus).

usage: pymodbus_client.py tcp HOST PORT | serial DEVICE BAUD
"""
import sys

from pymodbus.client import ModbusSerialClient, ModbusTcpClient

UNIT = 7

if sys.argv[1] == "tcp":
    client = ModbusTcpClient(sys.argv[2], port=int(sys.argv[3]), timeout=5)
else:
    client = ModbusSerialClient(sys.argv[2], baudrate=int(sys.argv[3]), parity="N", stopbits=1, timeout=5)
assert client.connect(), "no connection"


def good(answer):
    assert not answer.isError(), answer
    return answer


good(client.write_coil(20, True, slave=UNIT))
good(client.write_coils(21, [True, False, True], slave=UNIT))
assert good(client.read_coils(19, 5, slave=UNIT)).bits[:5] == [False, True, True, False, True]
assert len(good(client.read_discrete_inputs(0, 24, slave=UNIT)).bits) == 24
good(client.write_register(0, 4711, slave=UNIT))
good(client.write_registers(1, [1, 65535], slave=UNIT))
assert good(client.read_holding_registers(0, 3, slave=UNIT)).registers == [4711, 1, 65535]
assert good(client.read_input_registers(0, 1, slave=UNIT)).registers == [230]
refused = client.read_coils(20, 5, slave=UNIT)
assert refused.isError() and refused.exception_code == 2, refused
assert good(client.read_coils(20, 4, slave=UNIT)).bits[:4] == [True, True, False, True]
client.close()
print("done")
