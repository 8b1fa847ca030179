import type { ColumnEvidence, ColumnUse } from '../../core/intake';
import { columnKey } from '../../schemas/intake';
import { Choice, Heads, sentence, Tests } from './match-parts';
import type { MatchStepProps } from './MatchStep';
import { rateOptions, roleOptions, roleValue, unitOptions, unitValue, withCharge, withRole, withUnit } from './roles';

/** A row for each column: what it is taken for, its unit, and what speaks for it. */
export function ColumnTable({ intake, preview, actions }: MatchStepProps) {
  return (
    <div className="ledger-scroll" role="region" aria-label="Columns of the file" tabIndex={0}>
      <table className="ledger ledger-roomy ledger-stack evidence">
        <Heads heads={['Column', 'Values', 'Taken as', 'Unit', 'Evidence', 'Tests met']} />
        <tbody>
          {preview.columns.map((column) => (
            <ColumnRow key={column.index} column={column} intake={intake} preview={preview} actions={actions} />
          ))}
        </tbody>
      </table>
    </div>
  );
}

function ColumnRow({ column, intake, preview, actions }: MatchStepProps & { column: ColumnEvidence }) {
  const key = columnKey(column);
  const asks = !column.sure && !intake.confirmed.includes(key);
  const fixed = intake.state === 'kept' || intake.state === 'given-up';
  const name = column.name || `Column ${column.letter}`;
  const change = (edit: (use: ColumnUse) => ColumnUse) => {
    const last = column.index + column.span - 1;
    const columns = (preview.columnMap.columns ?? []).map((use) =>
      use.index >= column.index && use.index <= last ? edit(use) : use,
    );
    actions.match({ ...preview.columnMap, columns }, { confirm: [key] });
  };
  const units = unitOptions(column);
  const uses = preview.columnMap.columns ?? [];
  const rate = column.takenAs === 'rate' ? uses.find((use) => use.index === column.index) : undefined;
  return (
    <tr className={asks ? 'asks' : undefined}>
      <th scope="row" className="left wrap strong">
        {column.span > 1 ? `${name} and ${column.span - 1} more` : name}
      </th>
      <td className="left quiet wrap" data-name="Values">
        {column.values}
      </td>
      <td className="left" data-name="Taken as">
        <Choice
          className="role-select"
          label={`${name}, taken as`}
          value={roleValue(column)}
          options={roleOptions(preview.kind, column, preview.columnMap.layout)}
          disabled={fixed || actions.busy}
          onChoose={(value) => change((use) => withRole(use, value))}
        />
      </td>
      <td className="left" data-name="Unit">
        {rate ? (
          <Choice
            className="role-select"
            label={`${name}, rate of`}
            value={rate.charge ?? ''}
            options={rateOptions(uses)}
            disabled={fixed || actions.busy}
            onChoose={(value) => change((use) => withCharge(use, value))}
          />
        ) : units.length > 0 ? (
          <span className={column.isUnitAssumed ? 'assumed' : undefined}>
            <Choice
              className="unit-select"
              label={`${name}, unit${column.isUnitAssumed ? ', assumed' : ''}`}
              value={unitValue(column)}
              options={units}
              disabled={fixed || actions.busy}
              onChoose={(value) => change((use) => withUnit(use, value))}
            />
          </span>
        ) : (
          column.unit
        )}
      </td>
      <td className="left wrap" data-name="Evidence">
        {sentence(column.why)}
      </td>
      <Tests
        met={column.testsMet}
        total={column.testsTotal}
        asks={asks}
        name={name}
        onConfirm={fixed ? null : () => actions.confirm([key])}
      />
    </tr>
  );
}
