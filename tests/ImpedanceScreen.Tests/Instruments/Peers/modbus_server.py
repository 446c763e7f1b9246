"""A pymodbus server with the values that every peer of these tests starts with: unit 17, 100 items of each kind."""
import sys

from pymodbus.datastore import ModbusSequentialDataBlock, ModbusServerContext, ModbusSlaveContext
from pymodbus.server import StartSerialServer, StartTcpServer
from pymodbus.transaction import ModbusRtuFramer

SIZE = 100


def block(values):
    return ModbusSequentialDataBlock(0, list(values))


unit = ModbusSlaveContext(
    co=block(i % 2 == 1 for i in range(SIZE)),
    di=block(i % 3 == 0 for i in range(SIZE)),
    hr=block(1000 + i for i in range(SIZE)),
    ir=block(2000 + i for i in range(SIZE)),
    zero_mode=True,
)
context = ModbusServerContext(slaves={17: unit}, single=False)
kind, where = sys.argv[1:]
print("ready", flush=True)
if kind == "tcp":
    StartTcpServer(context=context, address=("127.0.0.1", int(where)))
else:
    StartSerialServer(context=context, framer=ModbusRtuFramer, port=where, baudrate=115200, ignore_missing_slaves=True)
