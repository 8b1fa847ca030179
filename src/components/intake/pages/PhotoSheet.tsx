import { useState } from 'react';

/** A photo of a bill, turned and enlarged; a browser that cannot read it says so. */
export function PhotoSheet(props: { address: string; fileName: string; quarters: number; zoom: number }) {
  const { address, fileName, quarters, zoom } = props;
  const [size, setSize] = useState({ width: 3, height: 4 });
  const [fault, setFault] = useState(false);
  if (fault) {
    return (
      <p className="page-words">
        This photo is damaged and cannot be shown. Ask for it again, or save it as JPEG once more.
      </p>
    );
  }
  const upright = quarters % 2 === 0;
  const ratio = upright ? size.width / size.height : size.height / size.width;
  return (
    <div className="page-paper" style={{ width: `${zoom * 100}%`, aspectRatio: String(ratio) }}>
      <img
        src={address}
        alt={`Photo ${fileName}`}
        draggable={false}
        style={{
          width: upright ? '100%' : `${100 / ratio}%`,
          transform: `translate(-50%, -50%) rotate(${quarters * 90}deg)`,
        }}
        onLoad={({ currentTarget: { naturalWidth: width, naturalHeight: height } }) => setSize({ width, height })}
        onError={() => setFault(true)}
      />
    </div>
  );
}
