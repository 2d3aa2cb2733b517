"""A Modbus server on pymodbus, for tests: it holds what libmodbus-server.c holds.

    pymodbus_server.py tcp UNIT                     listens on a free port of the loopback
    pymodbus_server.py rtu UNIT PATH BAUD PARITY

Prints one line, "ready PORT" or "ready", and answers until it is killed or its standard input ends.
"""

import asyncio
import logging
import os
import socket
import sys

from pymodbus.datastore import ModbusSequentialDataBlock, ModbusServerContext, ModbusSlaveContext
from pymodbus.server.async_io import ModbusSerialServer, ModbusTcpServer
from pymodbus.transaction import ModbusRtuFramer

SIZE = 2100


def bits_of(data, count):
    return [(data[at // 8] >> (at % 8)) & 1 for at in range(count)]


def block(parts):
    values = [0] * SIZE
    for start, part in parts:
        values[start : start + len(part)] = part
    return ModbusSequentialDataBlock(0, values)


def context_of(unit):
    # 123456.0 = 47F12000 in its four orders.
    orders = [0x47F1, 0x2000, 0x2000, 0x47F1, 0xF147, 0x0020, 0x0020, 0xF147]
    holding = [
        (4, [0x0012]),
        (0x6B, [0x022B, 0, 0x0064]),
        (200, orders),
        (1000, list(range(1000, SIZE))),
    ]
    device = ModbusSlaveContext(
        co=block([(0x13, bits_of(b"\xcd\x6b\xb2\x0e\x1b", 37))]),
        di=block([(0xC4, bits_of(b"\xac\xdb\x35", 22))]),
        hr=block(holding),
        ir=block([(8, [10])]),
        zero_mode=True,
    )
    return ModbusServerContext(slaves={unit: device}, single=False)


def end_with_input():
    if not os.read(0, 1):
        os._exit(0)


def free_port():
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        return probe.getsockname()[1]


async def main():
    kind, unit, *rest = sys.argv[1:]
    asyncio.get_running_loop().add_reader(0, end_with_input)
    context = context_of(int(unit))
    if kind == "tcp":
        port = free_port()
        server = ModbusTcpServer(context, address=("127.0.0.1", port), allow_reuse_address=True)
        task = asyncio.ensure_future(server.serve_forever())
        await server.serving
        print("ready", port, flush=True)
        await task
        return
    path, baud, parity = rest
    server = ModbusSerialServer(
        context, framer=ModbusRtuFramer, port=path, baudrate=int(baud), parity=parity, bytesize=8, stopbits=1,
        ignore_missing_slaves=True,
    )
    await server.start()
    print("ready", flush=True)
    await server.serve_forever()


# It logs every exception that it answers, and every client that goes.
logging.disable(logging.ERROR)
asyncio.run(main())
