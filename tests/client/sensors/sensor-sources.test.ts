import { GEOLOCATION_CASE } from '#tests/client/sensors/geolocation-case.ts';
import { sensorSourceContract } from '#tests/client/sensors/sensor-source-contract.ts';
import { SERIAL_CASE } from '#tests/client/sensors/serial-case.ts';
import { SIMULATOR_CASE } from '#tests/client/sensors/simulator-case.ts';

for (const source of [SERIAL_CASE, GEOLOCATION_CASE, SIMULATOR_CASE]) sensorSourceContract(source);
