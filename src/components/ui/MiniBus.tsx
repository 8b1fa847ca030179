import { stationStateWords, type Station } from './station';

export interface MiniBusProps {
  stations: Pick<Station, 'id' | 'label' | 'state' | 'reason'>[];
}

/** The bus in miniature, for lists of engagements. Its text says what the picture shows. */
export function MiniBus({ stations }: MiniBusProps) {
  const words = stations.map((s) => `${s.label} ${stationStateWords[s.state]}`).join(', ');
  return (
    <span className="mini-bus" role="img" aria-label={words} title={words}>
      {stations.map((station) => (
        <i key={station.id} className={station.state} />
      ))}
    </span>
  );
}
