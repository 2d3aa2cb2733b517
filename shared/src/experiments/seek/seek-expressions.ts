import type { NumericField } from '../numeric-parameter.schema.js';
import { numericLeaves } from './expression-tree.js';
import { actuatorFieldName, actuatorValue, seekActuatorFields } from './seek-fields.js';
import type { SeekParameters } from './seek-parameters.schema.js';

/** Numbers and expressions that the law of a Seek uses; what is kept for other laws is left out. */
export function seekNumericFields(parameters: SeekParameters): NumericField[] {
  const { law, actuators, constraint, wideSearch } = parameters;
  const fields = seekActuatorFields(law.id);
  return [
    ...numericLeaves(law.parameters, 'parameters.law.parameters'),
    ...actuators.flatMap((actuator, i) => {
      const place = `parameters.actuators[${i}]`;
      return [
        ...numericLeaves({ min: actuator.min, max: actuator.max }, place),
        ...fields.flatMap((field) =>
          numericLeaves(actuatorValue(actuator, field), `${place}.${actuatorFieldName(field)}`),
        ),
      ];
    }),
    ...(constraint ? numericLeaves(constraint.bound, 'parameters.constraint.bound') : []),
    ...(wideSearch ? numericLeaves(wideSearch, 'parameters.wideSearch') : []),
  ];
}
