import './scene.css';
import { Canvas } from '@react-three/fiber';
import { useEffect, useMemo, useRef, useState } from 'react';
import type { ArmModel } from '../../shared/arm/model';
import { Arm } from './arm/Arm';
import { GroundShadow } from './arm/GroundShadow';
import { Bench } from './bench/Bench';
import { Floor } from './bench/Floor';
import { DrawingBoundary } from './DrawingBoundary';
import { DrawOnSamples } from './DrawOnSamples';
import { InkMaterialsContext } from './ink/ink-context';
import { colourMaterials, makeInkMaterials } from './ink/materials';
import { InksContext, useReadInks } from './inks';
import { CameraRig } from './sheet/CameraRig';
import { DriveSheet } from './sheet/DriveSheet';
import { type GhostDrag, GhostHandles, GhostProbe, noGhostEye } from './sheet/GhostHandles';
import { noSheetElements, SheetLines } from './sheet/SheetLines';
import type { SceneSource } from './source';
import type { View } from './views';
import './quiet-three';

interface Props {
  model: ArmModel;
  /** Null leaves the eye where a drag has put it. */
  view: View | null;
  source: SceneSource;
  /** False draws all past the base dotted: as last seen. */
  known: boolean;
  /** Outline where the built-in arm really is. */
  showTruth?: boolean;
  /** A drag has turned the view. */
  onTurned?: () => void;
  antialias?: boolean;
  /** A ghost of the tool to be dragged. */
  ghost?: GhostDrag | null;
}

/** The arm as a drawing in three dimensions. Numbers and Stop never depend on it. */
export default function ArmScene(props: Props) {
  // A lost picture is drawn again on a fresh canvas.
  const [attempt, setAttempt] = useState(0);
  const [lost, setLost] = useState(false);
  return (
    <div className="scene">
      <DrawingBoundary>
        <Drawing key={attempt} {...props} onLost={setLost} />
      </DrawingBoundary>
      {lost && (
        <p className="stage-note lost" role="status">
          <b>The picture was lost.</b> The numbers beside it are right.
          <button
            type="button"
            className="btn sm"
            onClick={() => {
              setLost(false);
              setAttempt(attempt + 1);
            }}
          >
            Draw again
          </button>
        </p>
      )}
    </div>
  );
}

function Drawing({
  model,
  view,
  source,
  known,
  showTruth = false,
  onTurned,
  antialias = true,
  ghost = null,
  onLost,
}: Props & { onLost: (lost: boolean) => void }) {
  const inks = useReadInks();
  const materials = useMemo(makeInkMaterials, []);
  // Set while rendering, so that the first picture has its colours already.
  useMemo(() => colourMaterials(materials, inks), [materials, inks]);
  useEffect(
    () => () => {
      for (const material of materials.all()) material.dispose();
    },
    [materials],
  );
  const elements = useRef(noSheetElements());
  const eye = useRef(noGhostEye());
  const alive = useRef(true);
  useEffect(() => {
    alive.current = true;
    return () => {
      alive.current = false;
    };
  }, []);
  return (
    <>
      <Canvas
        orthographic
        flat
        frameloop="demand"
        dpr={[1, 2]}
        camera={{ near: 0.1, far: 20, position: [2, -2, 2], up: [0, 0, 1] }}
        gl={{ antialias, alpha: true }}
        onCreated={({ gl }) => {
          const canvas = gl.domElement;
          canvas.dataset.ready = 'true';
          canvas.setAttribute('role', 'img');
          canvas.setAttribute(
            'aria-label',
            `${model.name}, drawn in three dimensions; drag to turn the view`,
          );
          canvas.addEventListener('webglcontextlost', (event) => {
            event.preventDefault();
            // Leaving the page gives the context back on purpose.
            if (alive.current) onLost(true);
          });
          canvas.addEventListener('webglcontextrestored', () => onLost(false));
        }}
      >
        <InksContext.Provider value={inks}>
          <InkMaterialsContext.Provider value={materials}>
            <CameraRig model={model} view={view} source={source} onTurned={() => onTurned?.()} />
            <DrawOnSamples source={source} />
            {ghost && <GhostProbe drag={ghost} eye={eye} />}
            <Floor model={model} />
            {known && <GroundShadow model={model} source={source} />}
            <Bench objects={model.bench} />
            <Arm model={model} source={source} known={known} />
            <DriveSheet
              model={model}
              source={source}
              known={known}
              showTruth={showTruth}
              elements={elements}
            />
          </InkMaterialsContext.Provider>
        </InksContext.Provider>
      </Canvas>
      <SheetLines elements={elements} />
      {ghost && <GhostHandles drag={ghost} eye={eye} />}
    </>
  );
}
