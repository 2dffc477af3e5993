<?xml version="1.0" encoding="UTF-8"?>
<StyledLayerDescriptor xmlns="http://www.opengis.net/sld" xmlns:ogc="http://www.opengis.net/ogc" xmlns:xlink="http://www.w3.org/1999/xlink" xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance" version="1.0.0" xsi:schemaLocation="http://www.opengis.net/sld http://schemas.opengis.net/sld/1.0.0/StyledLayerDescriptor.xsd">
  <NamedLayer>
    <Name>drawdown</Name>
    <UserStyle>
      <Name>drawdown</Name>
      <Title>Drawdown</Title>
      <Abstract>From light, the least, to dark, the most; most room for the lowest levels.</Abstract>
      <FeatureTypeStyle>
        <Rule>
          <Name>drawdown</Name>
          <Title>Drawdown</Title>
          <RasterSymbolizer>
            <Opacity>0.75</Opacity>
            <ColorMap>
              <!-- each level: the program repeats what follows, from the lowest level to the highest -->
              <ColorMapEntry color="COLOUR" quantity="QUANTITY" label="LABEL UNIT"/>
              <!-- end -->
            </ColorMap>
          </RasterSymbolizer>
        </Rule>
      </FeatureTypeStyle>
    </UserStyle>
  </NamedLayer>
</StyledLayerDescriptor>
